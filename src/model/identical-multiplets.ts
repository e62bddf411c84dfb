import { FormMaker } from "../couplings/form.js";
import type { DecayScheme, Reduced } from "../couplings/reduced-coupling.js";
import { equalRoots, negateRoot } from "../exact/signed-root.js";
import { states } from "../su3/state.js";

/**
 * The couplings that survive when both daughters come from one multiplet: exchange of spins, orbital motion and flavour
 * together must give + for bosons and - for fermions, so flavour itself gives (-1)^(L + S) for either.
 *
 * An unordered pair of daughters then has the amplitude sqrt(2) c(a, b), see `PAIR_WEIGHT`.
 */
export function exchangeSymmetric(scheme: DecayScheme, reduced: readonly Reduced[]): Reduced[] {
  const wanted = (scheme.L + scheme.twoS / 2) % 2 === 0 ? 1 : -1;
  const maker = new FormMaker(scheme, reduced);
  const [irrep] = scheme.to.map(({ irrep }) => irrep);
  const pairs = states(irrep!);
  return reduced.filter((_, index) =>
    states(scheme.from.irrep).every((initial) =>
      pairs.every((a) =>
        pairs.every((b) => {
          if (a.threeY + b.threeY !== initial.threeY || a.twoI3 + b.twoI3 !== initial.twoI3) return true;
          const term = (x: typeof a, y: typeof a) =>
            maker.chargeForm(initial, [x, y]).terms.find(({ reduced: at }) => at === index)?.c;
          const [direct, exchanged] = [term(a, b), term(b, a)];
          if (direct === undefined || exchanged === undefined) return direct === exchanged;
          return equalRoots(direct, wanted === 1 ? exchanged : negateRoot(exchanged));
        }),
      ),
    ),
  );
}

/**
 * Weight of an unordered pair's amplitude against c(a, b): the two orders add up to one normalised state. With the
 * identical-particle factor 1/2 it holds for a = b as well.
 */
export const PAIR_WEIGHT = Math.SQRT2;
