import { Matrix, SingularValueDecomposition } from "ml-matrix";
import { FormMaker } from "../couplings/form.js";
import { STRONG } from "../couplings/operator.js";
import { reducedCouplings } from "../couplings/reduced-coupling.js";
import { rootToNumber } from "../exact/signed-root.js";
import type { Multiplet } from "../hadrons/multiplet.js";
import { refuse } from "../require.js";
import { su3ClebschGordan } from "../su3/clebsch-gordan.js";
import { type Irrep, sameIrrep } from "../su3/irrep.js";
import { decomposeProduct } from "../su3/product.js";
import { conjugateState, type State, states } from "../su3/state.js";
import type { UntiedDecay } from "./resolve-decays.js";
import { chargeConjugationEven, exchangeSign, exchangeSymmetric } from "./selection-rules.js";

/** Sizes below this, relative to 1, are rounding: coefficients here are ratios of small roots. */
const NULL = 1e-9;

/** What the rule leaves: couplings that stay free, and every reduced coupling as a combination of them. */
export interface QuarkLineCouplings {
  /** The free ones, as (decay, reduced coupling) indices. */
  readonly free: readonly { readonly decay: number; readonly reduced: number }[];
  /** By decay, reduced coupling, free coupling. */
  readonly rows: readonly (readonly (readonly number[])[])[];
}

/**
 * The couplings that the quark-line rule leaves for a family of decays.
 *
 * The rule (nonet rule): no amplitude whose quark lines are disconnected, that is in which a meson's quark and antiquark
 * both end within that meson. Meson octets and singlets are written as quark-antiquark states, baryons by the quarks
 * they hold; every disconnected amplitude gives one linear equation for the reduced couplings. For the baryon octet this
 * is S = F - D; for three meson nonets the couplings of Tr T Tr(PP), Tr(TP) Tr P and their like vanish.
 * Source: S. Okubo, Phys. Lett. 5 (1963) 165; G. Zweig, CERN reports TH-401 and TH-412 (1964); J. Iizuka, Prog. Theor.
 * Phys. Suppl. 37 (1966) 21. Provenance: memory.
 *
 * @param decays - octet and singlet parts of the same hadrons
 * @throws InputError if a meson multiplet is neither octet nor singlet, or every coupling vanishes
 */
export function quarkLineCouplings(decays: readonly UntiedDecay[]): QuarkLineCouplings {
  const whole = [...decays, ...missingPartners(decays)];
  const columns = whole.flatMap(({ reduced }, decay) => reduced.map((_, r) => ({ decay, reduced: r })));
  const equations = disconnectedAmplitudes(whole, columns);
  const written = columns.findIndex(({ decay }) => decay === decays.length);
  const solutions = nullSpace(equations, columns.length).map((row) =>
    written < 0 ? row : row.slice(0, written),
  );
  const { pivots, rows } = rowReduced(solutions);
  if (pivots.length === 0) {
    const mend = "Every coupling vanishes; is a decay missing from the family?";
    refuse(
      "quarkLine",
      "decays that can obey the rule together",
      decays.map(({ name }) => name),
      mend,
    );
  }
  const column = (decay: number, reduced: number) =>
    columns.findIndex((c) => c.decay === decay && c.reduced === reduced);
  return {
    free: pivots.map((pivot) => columns[pivot]!),
    rows: decays.map(({ reduced }, d) => reduced.map((_, r) => rows.map((row) => row[column(d, r)]!))),
  };
}

/**
 * Decays that make the nonets of a family whole, with couplings that nobody asked for: the rule speaks of whole nonets,
 * and where a singlet is not declared its couplings are not 0 but unknown.
 */
function missingPartners(decays: readonly UntiedDecay[]): UntiedDecay[] {
  const nonets = decays[0]!.from.baryonNumber === 0 ? [0, 1, 2] : [2];
  const legs = ({ from, to }: UntiedDecay) => [from, ...to];
  const isOctet = ({ irrep }: Multiplet) => irrep.p === 1;
  const all = decays.flatMap((decay) => nonets.map((slot) => legs(decay)[slot]!));
  const partner = (multiplet: Multiplet, slot: number): Multiplet => {
    const alike = (decay: UntiedDecay) =>
      (slot === 0
        ? [decay.from]
        : nonets.includes(1) && areAlike(decays)
          ? decay.to
          : [legs(decay)[slot]!]
      ).filter((other) => isOctet(other) !== isOctet(multiplet));
    const irrep = isOctet(multiplet) ? { p: 0, q: 0 } : { p: 1, q: 1 };
    return decays.flatMap(alike)[0] ?? { ...multiplet, id: `partner of ${multiplet.id}`, irrep, members: [] };
  };
  if (all.some(({ irrep }) => irrep.p !== irrep.q || irrep.p > 1)) return [];
  const choices = [0, 1, 2].map((slot) => {
    const multiplet = legs(decays[0]!)[slot]!;
    return nonets.includes(slot) ? [multiplet, partner(multiplet, slot)] : [multiplet];
  });
  const known = new Set(decays.flatMap((decay) => keysOf(legs(decay))));
  const found: UntiedDecay[] = [];
  for (const from of choices[0]!)
    for (const first of choices[1]!)
      for (const second of choices[2]!) {
        const keys = keysOf([from, first, second]);
        if (keys.some((key) => known.has(key))) continue;
        for (const key of areAlike(decays) ? keys : keys.slice(0, 1)) known.add(key);
        const { L, twoS } = decays[0]!;
        const scheme = { from, to: [first, second] as const, operator: STRONG, L, twoS };
        const product = decomposeProduct(first.irrep, second.irrep);
        if (!product.some(({ irrep }) => sameIrrep(irrep, from.irrep))) continue;
        const couplings = reducedCouplings(scheme, "");
        const exchanged = first.id === second.id ? exchangeSymmetric(scheme, couplings) : couplings;
        const reduced = chargeConjugationEven(scheme, exchanged, [from, first, second]);
        if (reduced.length > 0) found.push({ ...decays[0]!, name: "", from, to: scheme.to, reduced });
      }
  return found;
}

/** A family's places of multiplets, as they are and with the daughters exchanged. */
function keysOf([from, first, second]: readonly Multiplet[]): string[] {
  return [
    [first, second],
    [second, first],
  ].map((pair) => [from, ...pair].map((multiplet) => multiplet!.id).join(" "));
}

/** Whether both daughters are of one nonet; mesons of two, as vector and pseudoscalar, have each its place. */
function areAlike(decays: readonly UntiedDecay[]): boolean {
  const [firsts, seconds] = [0, 1].map((slot) => decays.map(({ to }) => to[slot]!.id));
  return firsts!.some((id) => seconds!.includes(id));
}

/** A state of a slot in the quark basis: its quark lines, and its overlap with the states of each multiplet. */
interface Lines {
  /** Quark and antiquark of a meson, 0 = u, 1 = d, 2 = s; undefined for a baryon. */
  readonly meson?: readonly [number, number];
  /** Numbers of u, d and s quarks of a baryon. */
  readonly quarks?: readonly number[];
  overlap(irrep: Irrep): { state: State; weight: number }[];
}

function disconnectedAmplitudes(
  decays: readonly UntiedDecay[],
  columns: readonly { decay: number; reduced: number }[],
): number[][] {
  const slots = [0, 1, 2].map((slot) => {
    const multiplets = decays.map(({ from, to }) => [from, ...to][slot]!);
    return multiplets[0]!.baryonNumber === 0 ? mesonLines(multiplets) : baryonLines(multiplets);
  });
  const exchanged = areAlike(decays);
  const makers = decays.map((decay) => new FormMaker({ ...decay, operator: STRONG }, decay.reduced));
  const equations: number[][] = [];
  for (const parent of slots[0]!) {
    for (const first of slots[1]!) {
      for (const second of slots[2]!) {
        if (isConnected(parent, first, second)) continue;
        const row = columns.map(() => 0);
        for (const [d, decay] of decays.entries()) {
          for (const [a, b, weight] of exchanged
            ? orders(decay, first, second)
            : [[first, second, 1] as const]) {
            for (const { reduced, value } of amplitude(makers[d]!, decay, parent, a, b)) {
              row[columns.findIndex((column) => column.decay === d && column.reduced === reduced)]! +=
                weight * value;
            }
          }
        }
        if (row.some((value) => Math.abs(value) > NULL)) equations.push(row);
      }
    }
  }
  return equations;
}

/**
 * The ways two states of one nonet can be the daughters of a decay, with weights: in both orders, as one normalised state
 * where they come from one multiplet.
 */
function orders(decay: UntiedDecay, first: Lines, second: Lines): [Lines, Lines, number][] {
  const [a, b] = decay.to;
  const norm = a.id === b.id ? Math.SQRT1_2 : 1;
  return [
    [first, second, norm],
    [second, first, norm * exchangeSign(decay)],
  ];
}

/** The amplitude between states of the quark basis, by reduced coupling of one decay. */
function amplitude(
  maker: FormMaker,
  { from, to }: UntiedDecay,
  parent: Lines,
  first: Lines,
  second: Lines,
): { reduced: number; value: number }[] {
  return parent.overlap(from.irrep).flatMap((r) =>
    first.overlap(to[0].irrep).flatMap((a) =>
      second.overlap(to[1].irrep).flatMap((b) => {
        if (a.state.threeY + b.state.threeY !== r.state.threeY) return [];
        if (a.state.twoI3 + b.state.twoI3 !== r.state.twoI3) return [];
        const weight = r.weight * a.weight * b.weight;
        const { terms } = maker.chargeForm(r.state, [a.state, b.state]);
        return terms.map(({ reduced, c }) => ({ reduced, value: weight * rootToNumber(c) }));
      }),
    ),
  );
}

function isConnected(parent: Lines, first: Lines, second: Lines): boolean {
  if (parent.meson === undefined) {
    const [k, l] = second.meson!;
    return k !== l || parent.quarks![k]! > 0;
  }
  const [[i, j], [k, l], [m, n]] = [parent.meson, first.meson!, second.meson!];
  return (i === k && l === m && n === j) || (i === m && n === k && l === j);
}

/** Flavours 0 = u, 1 = d, 2 = s, in the order of the triplet's states. */
const FLAVOURS = [0, 1, 2];

function mesonLines(multiplets: readonly { readonly id: string; readonly irrep: Irrep }[]): Lines[] {
  for (const { id, irrep } of multiplets) {
    if (irrep.p === irrep.q && irrep.p <= 1) continue;
    refuse("quarkLine", "meson octets and singlets", id, "The rule speaks of quark-antiquark states.");
  }
  const triplet = states({ p: 1, q: 0 });
  return FLAVOURS.flatMap((quark) =>
    FLAVOURS.map((antiquark): Lines => {
      const image = conjugateState(triplet[antiquark]!);
      return {
        meson: [quark, antiquark],
        overlap: (irrep) =>
          states(irrep).flatMap((state) => {
            const c = su3ClebschGordan(triplet[quark]!, image.state, state, 1);
            return c.sign === 0 ? [] : [{ state, weight: image.phase * rootToNumber(c) }];
          }),
      };
    }),
  );
}

function baryonLines(multiplets: readonly { readonly irrep: Irrep }[]): Lines[] {
  const [{ irrep }] = multiplets as [{ irrep: Irrep }];
  return states(irrep).map((state): Lines => {
    const strange = 1 - state.threeY / 3;
    return {
      quarks: [(3 - strange + state.twoI3) / 2, (3 - strange - state.twoI3) / 2, strange],
      overlap: (other) => (sameIrrep(other, irrep) ? [{ state, weight: 1 }] : []),
    };
  });
}

/** A basis of the null space of the equations, as rows. */
function nullSpace(equations: readonly (readonly number[])[], count: number): number[][] {
  const identity = Array.from({ length: count }, (_, k) =>
    Array.from({ length: count }, (_, j) => (j === k ? 1 : 0)),
  );
  if (equations.length === 0) return identity;
  // Rows of zeros make the matrix at least square, so that all right vectors come out.
  const padded = [...equations, ...identity.map((row) => row.map(() => 0))];
  const { diagonal, rightSingularVectors } = new SingularValueDecomposition(
    new Matrix(padded.map((row) => [...row])),
  );
  const largest = Math.max(...diagonal, 1);
  return diagonal.flatMap((value, k) => (value < NULL * largest ? [rightSingularVectors.getColumn(k)] : []));
}

/** Reduced row echelon form; the pivots are the first columns that can be. */
function rowReduced(basis: readonly (readonly number[])[]): { pivots: number[]; rows: number[][] } {
  const rows = basis.map((row) => [...row]);
  const pivots: number[] = [];
  for (let column = 0; column < (rows[0]?.length ?? 0) && pivots.length < rows.length; column++) {
    const at = pivots.length;
    const best = rows
      .slice(at)
      .reduce((top, row, k) => (Math.abs(row[column]!) > Math.abs(rows[top]![column]!) ? at + k : top), at);
    if (Math.abs(rows[best]![column]!) < NULL) continue;
    [rows[at], rows[best]] = [rows[best]!, rows[at]!];
    rows[at] = rows[at]!.map((value) => value / rows[at]![column]!);
    for (const [k, row] of rows.entries()) {
      if (k !== at) rows[k] = row.map((value, j) => value - row[column]! * rows[at]![j]!);
    }
    pivots.push(column);
  }
  return {
    pivots,
    rows: rows.slice(0, pivots.length).map((row) => row.map((value) => (Math.abs(value) < NULL ? 0 : value))),
  };
}
