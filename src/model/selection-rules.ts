import { FormMaker } from "../couplings/form.js";
import type { DecayScheme, Reduced } from "../couplings/reduced-coupling.js";
import { equalRoots, negateRoot, type SignedRoot, ZERO_ROOT } from "../exact/signed-root.js";
import type { Multiplet } from "../hadrons/multiplet.js";
import { conjugate, sameIrrep } from "../su3/irrep.js";
import { conjugateState, type State, states } from "../su3/state.js";

/**
 * The couplings that survive when both daughters come from one multiplet: exchange of spins, orbital motion and flavour
 * together must give + for bosons and - for fermions, so flavour itself gives (-1)^(L + S) for either.
 */
export function exchangeSymmetric(scheme: DecayScheme, reduced: readonly Reduced[]): Reduced[] {
  const wanted = exchangeSign(scheme);
  return withSymmetry(scheme, reduced, (initial, a, b) => ({ initial, finals: [b, a], sign: wanted }));
}

/** Sign that exchange of two daughters of equal spin gives through spin and orbital motion: (-1)^(L + S). */
export function exchangeSign({ L, twoS }: { readonly L: number; readonly twoS: number }): 1 | -1 {
  return (L + twoS / 2) % 2 === 0 ? 1 : -1;
}

/**
 * The couplings that charge conjugation leaves, for mesons whose neutral members have a C parity: the product of the
 * three C parities is + for D-type and - for F-type couplings of octets.
 *
 * @returns all of them where a multiplet has no C parity or is not its own conjugate
 */
export function chargeConjugationEven(
  scheme: DecayScheme,
  reduced: readonly Reduced[],
  multiplets: readonly Multiplet[],
): Reduced[] {
  const parities = multiplets.map(cParityOf);
  if (parities.some((c) => c === null)) return [...reduced];
  if (multiplets.some(({ irrep }) => !sameIrrep(irrep, conjugate(irrep)))) return [...reduced];
  const product = parities.reduce<number>((sign, c) => sign * c!, 1);
  return withSymmetry(scheme, reduced, (initial, a, b) => {
    const images = [initial, a, b].map(chargeConjugate);
    const sign = images.reduce((s, { phase }) => s * phase, product);
    return { initial: images[0]!.state, finals: [images[1]!.state, images[2]!.state], sign: sign as 1 | -1 };
  });
}

/** C parity of the neutral members of a meson multiplet; null where none of them has one. */
export function cParityOf(multiplet: Multiplet): 1 | -1 | null {
  if (multiplet.baryonNumber !== 0) return null;
  const neutral = multiplet.members
    .flatMap(({ hadrons }) => hadrons)
    .filter(({ antiparticle }) => antiparticle === null);
  return neutral.find(({ cParity }) => cParity !== null)?.cParity ?? null;
}

/**
 * Whether G parity lets a channel of mesons happen: G = C (-1)^I of each, for states without strangeness; true where it is
 * not defined.
 *
 * Source: T.D. Lee and C.N. Yang, Nuovo Cimento 3 (1956) 749. Provenance: memory.
 * @param multiplets - parent's, then daughters'; `states` in the same order
 */
export function allowedByGParity(multiplets: readonly Multiplet[], states: readonly State[]): boolean {
  const parities = multiplets.map((multiplet, k) => {
    const { threeY, twoI } = states[k]!;
    const c = multiplet.charm === 0 && threeY === 0 ? cParityOf(multiplet) : null;
    return c === null ? null : twoI % 4 === 0 ? c : -c;
  });
  return parities.some((g) => g === null) || parities[0] === parities[1]! * parities[2]!;
}

/** The conjugate state, with phases such that a state with Y = I = 0 is its own image. */
function chargeConjugate(state: State): { state: State; phase: 1 | -1 } {
  const image = conjugateState(state);
  const neutral = conjugateState({ ...state, threeY: 0, twoI: 0, twoI3: 0 });
  return { state: image.state, phase: (image.phase * neutral.phase) as 1 | -1 };
}

type Image = { readonly initial: State; readonly finals: readonly [State, State]; readonly sign: 1 | -1 };

/** The couplings all of whose coefficients equal `sign` times that of the image of their channel. */
function withSymmetry(
  scheme: DecayScheme,
  reduced: readonly Reduced[],
  imageOf: (initial: State, a: State, b: State) => Image,
): Reduced[] {
  const maker = new FormMaker(scheme, reduced);
  const [first, second] = scheme.to.map(({ irrep }) => states(irrep)) as [State[], State[]];
  const coefficient = (index: number, initial: State, finals: readonly State[]): SignedRoot =>
    maker.chargeForm(initial, finals).terms.find((term) => term.reduced === index)?.c ?? ZERO_ROOT;
  const channels = states(scheme.from.irrep).flatMap((initial) =>
    first.flatMap((a) =>
      second
        .filter((b) => a.threeY + b.threeY === initial.threeY && a.twoI3 + b.twoI3 === initial.twoI3)
        .map((b) => ({ initial, a, b })),
    ),
  );
  return reduced.filter((_, index) =>
    channels.every(({ initial, a, b }) => {
      const image = imageOf(initial, a, b);
      const mirrored = coefficient(index, image.initial, image.finals);
      return equalRoots(
        coefficient(index, initial, [a, b]),
        image.sign === 1 ? mirrored : negateRoot(mirrored),
      );
    }),
  );
}
