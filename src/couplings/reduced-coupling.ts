import { refuse } from "../require.js";
import { type Irrep, irrepName, sameIrrep } from "../su3/irrep.js";
import {
  type CouplingPath,
  type CouplingStep,
  couplingPaths,
  decomposeProduct,
  irrepMultiplicities,
} from "../su3/product.js";
import type { Operator } from "./operator.js";

/** A multiplet as far as flavour goes. A whole `Multiplet` of hadrons will do. */
export interface FlavourMultiplet {
  readonly id: string;
  readonly irrep: Irrep;
}

/**
 * A family of decays by flavour: one multiplet into others, by an operator, in one partial wave.
 *
 * The order of `to` is part of the phase convention: baryon first, meson second. Exchanging them changes the sign of
 * the antisymmetric coupling, hence of F.
 */
export interface DecayScheme {
  readonly from: FlavourMultiplet;
  readonly to: readonly FlavourMultiplet[];
  readonly operator: Operator;
  readonly L: number;
  readonly twoS: number;
}

/**
 * One independent SU(3)-invariant coupling of a decay scheme, by the Wigner-Eckart theorem.
 *
 * Initial irrep and operator couple to `entry`; the finals couple from left to right along `path`, whose last step has
 * the same irrep. For the strong interaction `entry` is the initial irrep itself.
 */
export interface Reduced {
  readonly name: string;
  readonly from: string;
  readonly operator: string;
  readonly operatorIrrep: Irrep;
  readonly to: readonly string[];
  readonly entry: CouplingStep;
  readonly path: readonly CouplingStep[];
  readonly twoS: number;
  readonly L: number;
  readonly complex: boolean;
}

/**
 * All independent reduced couplings of a decay scheme: by operator irrep, then entry, then path.
 *
 * Named `g(8_1)`, `g(8_2)`, `g(10)` by the last steps of their path for the strong interaction, and `h(entry; path)`
 * otherwise; a copy is numbered only where there are several.
 * @param prefix - put before each name with a dot, to tell several decays of one study apart
 * @throws InputError if SU(3) permits none; says what the finals contain
 * @example reducedCouplings(octetToOctets).map(({ name }) => name) // ["g(8_1)", "g(8_2)"]
 */
export function reducedCouplings(scheme: DecayScheme, prefix = ""): Reduced[] {
  const { from, to, operator, L, twoS } = scheme;
  if (to.length < 2)
    refuse(
      "reducedCouplings: to",
      "two multiplets or more",
      to.map(({ id }) => id),
    );
  const finals = to.map(({ irrep }) => irrep);
  const paths = couplingPaths(finals);
  const reduced = operatorIrreps(operator).flatMap((operatorIrrep) =>
    decomposeProduct(from.irrep, operatorIrrep).flatMap((entry) =>
      copies(entry.multiplicity).flatMap((copy) =>
        paths
          .filter(({ irrep }) => sameIrrep(irrep, entry.irrep))
          .map(({ path }): Reduced => {
            const label = pathLabel(finals, path);
            const step = stepLabel({ irrep: entry.irrep, copy }, entry.multiplicity);
            const name = isSinglet(operatorIrrep) ? `g(${label})` : `h(${step}; ${label})`;
            return {
              name: prefix === "" ? name : `${prefix}.${name}`,
              from: from.id,
              operator: operator.name,
              operatorIrrep,
              to: to.map(({ id }) => id),
              entry: { irrep: entry.irrep, copy },
              path,
              twoS,
              L,
              complex: operator.complex,
            };
          }),
      ),
    ),
  );
  if (reduced.length === 0) refuseForbidden(scheme, finals);
  return reduced;
}

function operatorIrreps({ parts }: Operator): Irrep[] {
  const irreps: Irrep[] = [];
  for (const { state } of parts) {
    if (!irreps.some((irrep) => sameIrrep(irrep, state.irrep))) irreps.push(state.irrep);
  }
  return irreps;
}

/** The irreps passed, with numbers for the copies of one product that has several. */
function pathLabel(finals: readonly Irrep[], path: CouplingPath["path"]): string {
  let left = finals[0]!;
  const labels = path.map((step, index) => {
    const series = decomposeProduct(left, finals[index + 1]!);
    left = step.irrep;
    return stepLabel(step, series.find(({ irrep }) => sameIrrep(irrep, step.irrep))!.multiplicity);
  });
  return labels.join(", ");
}

function stepLabel({ irrep, copy }: CouplingStep, multiplicity: number): string {
  return multiplicity > 1 ? `${irrepName(irrep)}_${copy}` : irrepName(irrep);
}

function refuseForbidden({ from, operator }: DecayScheme, finals: readonly Irrep[]): never {
  const contents = irrepMultiplicities(finals)
    .map(({ irrep, multiplicity }) => (multiplicity > 1 ? `${multiplicity} x ` : "") + irrepName(irrep))
    .join(", ");
  refuse(
    `reducedCouplings: ${from.id} by the operator ${operator.name}`,
    `a product of flavours that meets ${finals.map(irrepName).join(" x ")} = ${contents}`,
    irrepName(from.irrep),
    "SU(3) forbids this decay; check the irreps of the multiplets.",
  );
}

function isSinglet({ p, q }: Irrep): boolean {
  return p === 0 && q === 0;
}

function copies(multiplicity: number): number[] {
  return Array.from({ length: multiplicity }, (_, index) => index + 1);
}
