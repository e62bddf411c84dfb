import { Matrix, pseudoInverse } from "ml-matrix";
import { refuse } from "../require.js";
import type { IsospinMultiplet } from "../su3/irrep.js";
import { placeText } from "./multiplet.js";

/** An isospin multiplet whose mass is known. */
export interface KnownMass extends IsospinMultiplet {
  readonly massMeV: number;
}

/** Least error of a mass from the relation, in MeV: octets of baryons obey it to about that. */
export const RELATION_ERROR_MEV = 20;

/** A place counts as fixed by the known masses when it lies in their space to this. */
const DETERMINED = 1e-9;

/**
 * Mass of a missing member by the relation of Gell-Mann and Okubo, M = a + b Y + c (I(I+1) - Y^2/4), in MeV.
 *
 * In an octet it says 2(N + Xi) = 3 Lambda + Sigma, in a decuplet that spacings are equal; more known masses than
 * needed are averaged. It holds for unmixed masses only, and mesons obey it in the squares of their masses.
 * Source: M. Gell-Mann, Caltech report CTSL-20 (1961); S. Okubo, Prog. Theor. Phys. 27 (1962) 949. Provenance: memory.
 * @param known - members with masses > 0
 * @param power - 1 for baryons, 2 for mesons
 * @returns the mass; for baryons <= 0 where the known masses are far from obeying it
 * @throws InputError if the known masses do not fix the one wanted, or its square would not be > 0
 * @example gellMannOkuboMassMeV([N, Lambda, Sigma], { threeY: -3, twoI: 1 }, 1)
 */
export function gellMannOkuboMassMeV(
  known: readonly KnownMass[],
  place: IsospinMultiplet,
  power: 1 | 2,
): number {
  const inverse = pseudoInverse(new Matrix(known.map(basis)));
  const wanted = new Matrix([basis(place)]);
  const weights = wanted.mmul(inverse);
  const reached = weights.mmul(new Matrix(known.map(basis)));
  if (Matrix.sub(wanted, reached).norm() > DETERMINED) {
    const have = known.map(placeText).join(", ");
    refuse(
      "mass relation",
      `members whose masses fix that of ${placeText(place)}`,
      have,
      "Give the mass, or add members.",
    );
  }
  const sum = weights.to1DArray().reduce((total, w, k) => total + w * known[k]!.massMeV ** power, 0);
  if (power === 2 && !(sum > 0))
    refuse("mass relation", "a squared mass > 0", sum, "Check the masses of the other members.");
  return sum ** (1 / power);
}

function basis({ threeY, twoI }: IsospinMultiplet): number[] {
  const [Y, I] = [threeY / 3, twoI / 2];
  return [1, Y, I * (I + 1) - (Y * Y) / 4];
}
