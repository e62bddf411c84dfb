import { rootToNumber } from "../exact/signed-root.js";
import { isospinAveragedMassMeV } from "../hadrons/multiplet.js";
import { refuse } from "../require.js";
import { irrepName } from "../su3/irrep.js";
import { isoscalarTable } from "../su3/isoscalar-factors.js";
import type { MixedStates } from "./resolve-mixing.js";

type MixedPair = Pick<MixedStates, "bare" | "members">;

const OCTET = { p: 1, q: 1 };

/**
 * Ratio of sin 2t of one mixed pair to that of another between the same two multiplets, to first order in the breaking.
 *
 * The element of the mass operator between two bare states is (m1 - m2)/2 sin 2t, with squares of masses for mesons. The
 * breaking is the member Y = I = 0 of an octet; where the second irrep is once in the first one times an octet, all these
 * elements are one number times isoscalar factors, e.g. equal for Sigma and Xi of an octet and a decuplet.
 * Source: common practice (first-order breaking as in the mass formulae); the factors are computed.
 * @throws InputError for pairs of other multiplets or in another order, a second irrep that is there more than once, a
 * pair of equal masses, or a pair that the breaking does not mix
 */
export function tiedRatio(pair: MixedPair, leader: MixedPair): number {
  const ids = ({ bare }: MixedPair) => bare.map(({ multiplet }) => multiplet.id);
  if (ids(pair).join() !== ids(leader).join()) {
    refuse(
      "angle",
      `to be tied to a pair of ${ids(pair).join(" and ")} in this order`,
      ids(leader).join(" and "),
    );
  }
  const [from, to] = pair.bare.map(({ multiplet }) => multiplet.irrep) as [typeof OCTET, typeof OCTET];
  const table = isoscalarTable(from, OCTET, { into: to });
  if (table.series[0]!.multiplicity > 1) {
    const mend = "Give each its own angle.";
    refuse(
      "angle",
      `${irrepName(to)} once in ${irrepName(from)}x8, so that one number rules the mixing`,
      "it twice",
      mend,
    );
  }
  const factor = ({ bare }: MixedPair) => {
    const { threeY, twoI } = bare[0]!;
    const channel = { threeY1: threeY, twoI1: twoI, threeY2: 0, twoI2: 0 };
    const value = rootToNumber(table.factor(to, 1, { threeY, twoI }, channel));
    if (value !== 0) return value;
    return refuse("angle", "states that the breaking mixes in first order", { threeY, twoI });
  };
  const difference = ({ members, bare }: MixedPair) => {
    const power = bare[0]!.multiplet.baryonNumber === 0 ? 2 : 1;
    const [one, two] = members.map((member) => isospinAveragedMassMeV(member) ** power) as [number, number];
    return one - two || refuse("angle", "two states of different mass", isospinAveragedMassMeV(members[0]!));
  };
  return (factor(pair) * difference(leader)) / (factor(leader) * difference(pair));
}
