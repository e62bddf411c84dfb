import { addRoots } from "../exact/root-sum.js";
import { formatRoot, multiplyRoots, type SignedRoot, signedRoot, ZERO_ROOT } from "../exact/signed-root.js";
import { requireIdentity } from "../require.js";
import { conjugate, type Irrep, type IsospinMultiplet, irrepDimension } from "./irrep.js";
import { type Channel, type IsoscalarTable, isoscalarTable } from "./isoscalar-factors.js";

/**
 * What a symmetry does to the copies of an irrep: rows are the copies of the product one starts from, columns those of
 * the product one arrives at. Orthogonal, and a single sign where the irrep occurs once.
 */
export type CopyMatrix = readonly (readonly SignedRoot[])[];

/**
 * Exchange of the factors: (-1)^(I1+I2-I) isf(left right; c1 c2)_i = sum over j of M_ij isf(right left; c2 c1)_j.
 *
 * For equal factors M is diagonal: +1 for symmetric copies, -1 for antisymmetric ones.
 * @throws InputError if the product does not hold the irrep
 */
export function exchangeMatrix(left: Irrep, right: Irrep, irrep: Irrep): CopyMatrix {
  const table = isoscalarTable(left, right, { into: irrep });
  const partner = isoscalarTable(right, left, { into: irrep });
  const place = leadingPlace(irrep);
  return copyMatrix(table, partner, irrep, irrep, (sum) => {
    for (const c of table.channels(place)) {
      const swapped = { threeY1: c.threeY2, twoI1: c.twoI2, threeY2: c.threeY1, twoI2: c.twoI1 };
      sum(place, c, place, swapped, signOfPower((c.twoI1 + c.twoI2 - place.twoI) / 2));
    }
  });
}

/**
 * Conjugation of all irreps: (-1)^(I1+I2-I) isf(left right; c)_i = sum over j of M_ij isf(leftbar rightbar; cbar)_j,
 * where cbar has all hypercharges reversed.
 *
 * @throws InputError if the product does not hold the irrep
 */
export function conjugationMatrix(left: Irrep, right: Irrep, irrep: Irrep): CopyMatrix {
  const table = isoscalarTable(left, right, { into: irrep });
  const partner = isoscalarTable(conjugate(left), conjugate(right), { into: conjugate(irrep) });
  const place = leadingPlace(irrep);
  const placeBar = reversed(place);
  return copyMatrix(table, partner, irrep, conjugate(irrep), (sum) => {
    for (const c of table.channels(place)) {
      const bar = { ...c, threeY1: negative(c.threeY1), threeY2: negative(c.threeY2) };
      sum(place, c, placeBar, bar, signOfPower((c.twoI1 + c.twoI2 - place.twoI) / 2));
    }
  });
}

/**
 * Transfer of the right factor to the other side:
 *
 *     e(c) sqrt((2I+1) / (2I1+1)) sqrt(dim left / dim irrep) isf(left right -> irrep; Y1 I1, Y2 I2 | Y I)_i
 *       = sum over j of M_ij isf(irrep rightbar -> left; Y I, -Y2 I2 | Y1 I1)_j,     e(c) = (-1)^(I - I1 + 2 I2 - Y2/2 - (p2-q2)/3)
 *
 * with the right factor conjugated as `conjugateState` does. Between full coefficients the same M stands in
 * sqrt(dim left / dim irrep) <l; r | s>_i = phase(r) sum over j of M_ij <s; rbar | l>_j.
 * @throws InputError if the product does not hold the irrep
 */
export function transferMatrix(left: Irrep, right: Irrep, irrep: Irrep): CopyMatrix {
  const table = isoscalarTable(left, right, { into: irrep });
  const partner = isoscalarTable(irrep, conjugate(right), { into: left });
  const place = leadingPlace(left);
  const dimensions = signedRoot(1, irrepDimension(left), irrepDimension(irrep));
  return copyMatrix(table, partner, irrep, left, (sum) => {
    for (const { threeY1: threeY, twoI1: twoI, threeY2, twoI2 } of partner.channels(place)) {
      const channel = {
        threeY1: place.threeY,
        twoI1: place.twoI,
        threeY2: negative(threeY2),
        twoI2,
      };
      const partnerChannel = { threeY1: threeY, twoI1: twoI, threeY2, twoI2 };
      const exponent = transferExponent(place.twoI, { threeY2: -threeY2, twoI2 }, twoI, right);
      const weight = multiplyRoots(dimensions, signedRoot(signOf(exponent), twoI + 1, place.twoI + 1));
      sum({ threeY, twoI }, channel, place, partnerChannel, weight);
    }
  });
}

/** I - I1 + 2 I2 - Y2/2 - (p2-q2)/3, an integer. */
function transferExponent(
  twoI1: number,
  { threeY2, twoI2 }: Pick<Channel, "threeY2" | "twoI2">,
  twoI: number,
  { p, q }: Irrep,
): number {
  return (3 * (twoI - twoI1) + 6 * twoI2 - threeY2 - 2 * (p - q)) / 6;
}

/** Adds one product of a factor of either table, times a weight, to the sum of an element. */
type AddTerm = (
  place: IsospinMultiplet,
  channel: Channel,
  partnerPlace: IsospinMultiplet,
  partnerChannel: Channel,
  weight: SignedRoot,
) => void;

/** The matrix whose elements are sums over a complete set of channels of the partner, where its rows are orthonormal. */
function copyMatrix(
  table: IsoscalarTable,
  partner: IsoscalarTable,
  irrep: Irrep,
  partnerIrrep: Irrep,
  eachTerm: (sum: AddTerm) => void,
): CopyMatrix {
  const copies = Array.from({ length: table.series[0]!.multiplicity }, (_, i) => i + 1);
  const partners = Array.from({ length: partner.series[0]!.multiplicity }, (_, j) => j + 1);
  return copies.map((i) =>
    partners.map((j) => {
      const terms: SignedRoot[] = [];
      eachTerm((place, channel, partnerPlace, partnerChannel, weight) => {
        const factor = table.factor(irrep, i, place, channel);
        const other = partner.factor(partnerIrrep, j, partnerPlace, partnerChannel);
        terms.push(multiplyRoots(weight, multiplyRoots(factor, other)));
      });
      return singleRoot("copyMatrix", terms);
    }),
  );
}

/** The sum of roots that must be a single root. */
export function singleRoot(where: string, terms: readonly SignedRoot[]): SignedRoot {
  const sum = addRoots(terms);
  requireIdentity(where, sum.length <= 1, () => `a sum is ${sum.map(formatRoot).join(" + ")}`);
  return sum[0] ?? ZERO_ROOT;
}

function leadingPlace({ p, q }: Irrep): IsospinMultiplet {
  return { threeY: p - q, twoI: p + q };
}

function reversed({ threeY, twoI }: IsospinMultiplet): IsospinMultiplet {
  return { threeY: negative(threeY), twoI };
}

function negative(n: number): number {
  return n === 0 ? 0 : -n;
}

function signOf(exponent: number): 1 | -1 {
  return exponent % 2 === 0 ? 1 : -1;
}

function signOfPower(exponent: number): SignedRoot {
  return signedRoot(signOf(exponent), 1);
}
