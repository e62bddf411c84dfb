import { STRONG } from "../couplings/operator.js";
import { type Reduced, reducedCouplings } from "../couplings/reduced-coupling.js";
import type { Multiplet } from "../hadrons/multiplet.js";
import { refuse } from "../require.js";
import type { Quantity, Study, StudyDecay } from "../study/study.js";
import { allowedWaves } from "../widths/allowed-waves.js";
import { type WidthModel, widthModel } from "../widths/width-model.js";
import { exchangeSymmetric } from "./identical-multiplets.js";
import type { Decay } from "./model.js";
import type { Problems } from "./problems.js";
import { resolveMultiplet, type StudyBoundMultiplet } from "./resolve-multiplets.js";

/** The decays of a study, with their reduced couplings numbered through; what cannot be resolved is noted. */
export function resolveDecays(
  study: Study,
  own: ReadonlyMap<string, StudyBoundMultiplet>,
  problems: Problems,
): Decay[] {
  const decays: Decay[] = [];
  let firstParameter = 0;
  const names = new Set<string>();
  for (const [k, written] of study.decays.entries()) {
    const path = `decays/${k}`;
    if (names.has(written.name)) {
      problems.add(
        path,
        `expected a \`name\` that tells this decay from the others, got ${JSON.stringify(written.name)}. Couplings are named by it.`,
      );
    }
    names.add(written.name);
    const decay = resolveDecay(written, path, own, firstParameter, problems);
    if (decay === undefined) continue;
    decays.push(decay);
    firstParameter += decay.reduced.length;
  }
  return decays;
}

function resolveDecay(
  written: StudyDecay,
  path: string,
  own: ReadonlyMap<string, StudyBoundMultiplet>,
  firstParameter: number,
  problems: Problems,
): Decay | undefined {
  const from = resolveMultiplet(written.from, `${path}/from`, own, problems)?.multiplet;
  const first = resolveMultiplet(written.to[0], `${path}/to/0`, own, problems)?.multiplet;
  const second = resolveMultiplet(written.to[1], `${path}/to/1`, own, problems)?.multiplet;
  const model = problems.attempt(`${path}/model`, () =>
    widthModel(written.model.id, plainOptions(written.model.options)),
  );
  if (from === undefined || first === undefined || second === undefined || model === undefined)
    return undefined;
  return problems.attempt(path, () => {
    requireBaryonFirst(from, first, second);
    const twoS = waveSpin(written, from, first, second);
    const reduced = couplingsOf(written, from, first, second, twoS);
    const { id, options } = model;
    return {
      name: written.name,
      from,
      to: [first, second],
      L: written.L,
      twoS,
      model: { id, options },
      masses: written.masses,
      reduced,
      firstParameter,
    };
  });
}

/** Options as plain numbers; a quantity with its unit is in MeV, as are the options it can stand for. */
function plainOptions(options: Readonly<Record<string, number | Quantity>>): Record<string, number> {
  return Object.fromEntries(
    Object.entries(options).map(([name, value]) => [name, typeof value === "number" ? value : value.value]),
  );
}

function requireBaryonFirst(from: Multiplet, first: Multiplet, second: Multiplet): void {
  if (first.baryonNumber + second.baryonNumber !== from.baryonNumber) {
    refuse(
      "to",
      `two multiplets of baryon number ${from.baryonNumber} together`,
      first.baryonNumber + second.baryonNumber,
    );
  }
  if (first.charm + second.charm !== from.charm) {
    refuse("to", `two multiplets of charm ${from.charm} together`, first.charm + second.charm);
  }
  if (first.baryonNumber === 0 && second.baryonNumber !== 0) {
    refuse(
      "to",
      "the baryon first, the meson second",
      `${first.id}, ${second.id}`,
      "Exchange them: the order fixes the sign of F.",
    );
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
    refuse(
      "L",
      "a wave that spin and parity allow",
      written.L,
      text === "" ? "They allow none; check the spins and parities." : `They allow: ${text}.`,
    );
  }
  if (withL.length > 1)
    refuse("S", "the daughters' total spin, since L leaves a choice", "nothing", `Allowed: ${text}.`);
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
  const reduced = first.id === second.id ? exchangeSymmetric(scheme, all) : all;
  if (reduced.length === 0) {
    refuse(
      "L",
      "a wave that two members of one multiplet can be in",
      written.L,
      "Exchange of the daughters forbids every coupling here.",
    );
  }
  return reduced;
}

/** The width model of a decay, made ready. */
export function modelOf(decay: Decay): WidthModel {
  return widthModel(decay.model.id, decay.model.options);
}
