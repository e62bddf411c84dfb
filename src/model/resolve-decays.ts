import { STRONG } from "../couplings/operator.js";
import { type Reduced, reducedCouplings } from "../couplings/reduced-coupling.js";
import type { Multiplet } from "../hadrons/multiplet.js";
import { refuse } from "../require.js";
import type { Quantity, Study, StudyDecay } from "../study/study.js";
import { allowedWaves } from "../widths/allowed-waves.js";
import { widthModel, widthModelDefinitions } from "../widths/width-model.js";
import type { Decay, Parameter } from "./model.js";
import type { Problems } from "./problems.js";
import { quarkLineCouplings } from "./quark-line.js";
import { resolveMultiplet, type StudyBoundMultiplet } from "./resolve-multiplets.js";
import { chargeConjugationEven, exchangeSymmetric } from "./selection-rules.js";

/** A decay before its reduced couplings are expressed in the couplings that are fitted. */
export type UntiedDecay = Omit<Decay, "couplingRows">;

/** The decays of a study and the couplings that are fitted; what cannot be resolved is noted. */
export function resolveDecays(
  study: Study,
  own: ReadonlyMap<string, StudyBoundMultiplet>,
  problems: Problems,
): { decays: Decay[]; couplings: Parameter[] } {
  const names = new Set<string>();
  const untied = study.decays.map((written) => {
    const { path } = written;
    if (names.has(written.name)) {
      problems.add(
        path,
        `expected a \`name\` that tells this decay from the others, got ${JSON.stringify(written.name)}. Couplings are named by it.`,
      );
    }
    names.add(written.name);
    return resolveDecay(written, path, own, problems);
  });
  const resolved = untied.filter((decay) => decay !== undefined);
  if (resolved.length < untied.length || problems.has("decays")) return { decays: [], couplings: [] };
  return tie(study, resolved, problems);
}

/** Expresses every reduced coupling in the ones that are fitted: itself, or those the quark-line rule leaves. */
function tie(
  study: Study,
  untied: readonly UntiedDecay[],
  problems: Problems,
): { decays: Decay[]; couplings: Parameter[] } {
  const couplings: Parameter[] = [];
  const rows: (readonly number[])[][] = untied.map(() => []);
  const families = study.quarkLine.map((names, k) => {
    const members = names.map((name) => untied.findIndex((decay) => decay.name === name));
    for (const [j, index] of members.entries()) {
      if (index < 0)
        problems.add(
          `quarkLine/${k}/${j}`,
          `expected the name of a decay of this study, got ${JSON.stringify(names[j])}.`,
        );
    }
    return members.filter((index) => index >= 0);
  });
  const parameterOf = (decay: UntiedDecay, name: string): number =>
    couplings.push({ name, kind: "coupling", unit: unitOf(decay), start: 1 }) - 1;
  for (const [k, family] of families.entries()) {
    const tied = problems.attempt(`quarkLine/${k}`, () =>
      quarkLineCouplings(family.map((index) => untied[index]!)),
    );
    if (tied === undefined) continue;
    const columns = tied.free.map(({ decay, reduced }) => {
      const owner = untied[family[decay]!]!;
      return parameterOf(owner, owner.reduced[reduced]!.name);
    });
    for (const [m, index] of family.entries()) {
      rows[index] = tied.rows[m]!.map((row) => sparse(columns.map((column, j) => [column, row[j]!])));
    }
  }
  for (const [index, decay] of untied.entries()) {
    if (families.some((family) => family.includes(index))) continue;
    rows[index] = decay.reduced.map(({ name }) => sparse([[parameterOf(decay, name), 1]]));
  }
  const filled = (row: readonly number[]) => Array.from({ length: couplings.length }, (_, k) => row[k] ?? 0);
  return {
    decays: untied.map((decay, index) => ({ ...decay, couplingRows: rows[index]!.map(filled) })),
    couplings,
  };
}

function sparse(entries: readonly (readonly [number, number])[]): number[] {
  const row: number[] = [];
  for (const [column, value] of entries) row[column] = value;
  return row;
}

function unitOf(decay: UntiedDecay): string {
  const { id, options } = decay.model;
  return widthModel(id, options).amplitudeUnit({ L: decay.L, parent: decay.from, daughters: decay.to });
}

function resolveDecay(
  written: StudyDecay,
  path: string,
  own: ReadonlyMap<string, StudyBoundMultiplet>,
  problems: Problems,
): UntiedDecay | undefined {
  const from = resolveMultiplet(written.from, `${path}/from`, own, problems)?.multiplet;
  const first = resolveMultiplet(written.to[0], `${path}/to/0`, own, problems)?.multiplet;
  const second = resolveMultiplet(written.to[1], `${path}/to/1`, own, problems)?.multiplet;
  const model = problems.attempt(`${path}/model`, () =>
    widthModel(written.model.id, plainOptions(written.model)),
  );
  if (from === undefined || first === undefined || second === undefined || model === undefined)
    return undefined;
  return problems.attempt(path, () => {
    requireBaryonFirst(from, first, second);
    const twoS = waveSpin(written, from, first, second);
    const reduced = couplingsOf(written, from, first, second, twoS);
    const { id, options } = model;
    const { name, L, masses, daughters } = written;
    // Asked for here, so that a model without a formula for this vertex is refused at its decay.
    model.amplitudeUnit({ L, parent: from, daughters: [first, second] });
    return {
      name,
      from,
      to: [first, second] as const,
      L,
      twoS,
      model: { id, options },
      masses,
      daughters,
      reduced,
    };
  });
}

/** Options as plain numbers. A quantity is an energy in MeV by now: refused where the option is none, or with an error. */
function plainOptions({ id, options }: StudyDecay["model"]): Record<string, number> {
  const known = widthModelDefinitions().find((definition) => definition.id === id)?.options ?? [];
  const plain = (name: string, value: number | Quantity): number => {
    if (typeof value === "number") return value;
    const unit = known.find((option) => option.name === name)?.unit ?? "MeV";
    const isPlain = value.plus === 0 && value.minus === 0 && value.limit === undefined;
    if (unit === "MeV" && isPlain) return value.value;
    const got = isPlain ? `${value.value} MeV` : `${value.value} +${value.plus} -${value.minus} MeV`;
    return refuse(
      name,
      unit === "MeV" ? "an energy without an error" : `a number without a unit (it is in ${unit})`,
      got,
    );
  };
  return Object.fromEntries(Object.entries(options).map(([name, value]) => [name, plain(name, value)]));
}

function requireBaryonFirst(from: Multiplet, first: Multiplet, second: Multiplet): void {
  for (const [key, word] of [
    ["baryonNumber", "baryon number"],
    ["charm", "charm"],
  ] as const) {
    const sum = first[key] + second[key];
    if (sum !== from[key]) refuse("to", `two multiplets of ${word} ${from[key]} together`, sum);
  }
  if (first.baryonNumber === 0 && second.baryonNumber !== 0) {
    const mend = "Exchange them: the order fixes the sign of F.";
    refuse("to", "the baryon first, the meson second", `${first.id}, ${second.id}`, mend);
  }
}

/** Twice the daughters' total spin in the wave the study names. */
function waveSpin(written: StudyDecay, from: Multiplet, first: Multiplet, second: Multiplet): number {
  const waves = allowedWaves(from, first, second);
  const withL = waves.filter(
    ({ L, twoS }) => L === written.L && (written.twoS === undefined || twoS === written.twoS),
  );
  const text = waves.map(({ L, twoS }) => `L=${L} S=${twoS % 2 === 0 ? twoS / 2 : `${twoS}/2`}`).join(", ");
  if (withL.length === 0) {
    const mend = text === "" ? "They allow none; check the spins and parities." : `They allow: ${text}.`;
    refuse("L", "a wave that spin and parity allow", written.L, mend);
  }
  if (withL.length > 1) {
    refuse("S", "the daughters' total spin, since L leaves a choice", "nothing", `Allowed: ${text}.`);
  }
  return withL[0]!.twoS;
}

function couplingsOf(
  written: StudyDecay,
  from: Multiplet,
  first: Multiplet,
  second: Multiplet,
  twoS: number,
): Reduced[] {
  const scheme = { from, to: [first, second], operator: STRONG, L: written.L, twoS };
  const all = reducedCouplings(scheme, written.name);
  const exchanged = first.id === second.id ? exchangeSymmetric(scheme, all) : all;
  if (exchanged.length === 0) {
    const mend = "Exchange of the two daughters forbids every coupling here.";
    refuse("L", "a wave that two members of one multiplet can be in", written.L, mend);
  }
  const reduced = chargeConjugationEven(scheme, exchanged, [from, first, second]);
  if (reduced.length === 0) {
    refuse(
      "from",
      "a decay that C parity allows",
      `${from.id} to ${first.id} ${second.id}`,
      "Check the C parities.",
    );
  }
  return reduced;
}
