import { InputError, type SourcePosition } from "../errors.js";
import { type FormProblem, formProblems } from "./form-problems.js";
import { keyProblems } from "./key-problems.js";
import { listProblems } from "./list-problems.js";
import { type StudyDocument, studySchema } from "./schema.js";
import type {
  Study,
  StudyMeasurement,
  StudyMember,
  StudyMode,
  StudyMultiplet,
  StudyProblem,
} from "./study.js";
import { readSyntax, type StudySyntax } from "./syntax.js";

/** A study file that may have faults of form: what is sound in it, and what is not. */
export interface StudyDraft {
  /** The entries without faults; undefined where too little is left. */
  readonly study: Study | undefined;
  readonly problems: readonly StudyProblem[];
}

/**
 * A study read from the bytes of a YAML file and checked for form. Looks nothing up.
 *
 * @param bytes - the file's content, UTF-8
 * @param file - its name, for messages
 * @throws InputError listing every problem with line and column
 */
export function readStudy(bytes: Uint8Array, file: string): Study {
  const { study, problems } = draftStudy(bytes, file);
  if (study === undefined || problems.length > 0) throw new InputError(listProblems(problems));
  return study;
}

/**
 * A study file checked for form, entry by entry, so that the sound ones can be checked further.
 *
 * @throws InputError if the file is no YAML text
 */
export function draftStudy(bytes: Uint8Array, file: string): StudyDraft {
  const syntax = readSyntax(bytes, file);
  const { plain } = syntax;
  const parsed = studySchema.safeParse(plain);
  const badKeys = keyProblems(syntax);
  if (parsed.success && badKeys.length === 0) {
    return { study: toStudy(parsed.data, everyEntry(plain), syntax, file), problems: syntax.problems };
  }
  const problems = [...badKeys, ...(parsed.success ? [] : formProblems(parsed.error.issues, syntax))];
  const { data, kept } = withoutFaults(plain, problems);
  const rest = studySchema.safeParse(data);
  return {
    study: rest.success ? toStudy(rest.data, kept, syntax, file) : undefined,
    problems: [...syntax.problems, ...problems],
  };
}

/** The lists of a study whose entries are checked one by one. */
const LISTS = ["decays", "mixing", "quarkLine", "measurements", "modes", "particles", "priors"] as const;
type List = (typeof LISTS)[number];

/** For each list, which entry of the file stands at each index of what is left. */
type Kept = Readonly<Record<List, readonly number[]>>;

function everyEntry(plain: unknown): Kept {
  return withoutFaults(plain, []).kept;
}

/** The data without the entries and keys that have faults. */
function withoutFaults(plain: unknown, problems: readonly FormProblem[]): { data: unknown; kept: Kept } {
  const data: Record<string, unknown> = typeof plain === "object" && plain !== null ? { ...plain } : {};
  const kept = Object.fromEntries(LISTS.map((list) => [list, [] as number[]])) as Record<List, number[]>;
  const faulty = (list: string, key: PropertyKey) =>
    problems.some(({ keys }) => keys[0] === list && String(keys[1]) === String(key));
  for (const list of LISTS) {
    const entries = data[list];
    if (!Array.isArray(entries)) continue;
    kept[list] = [...entries.keys()].filter((index) => !faulty(list, index));
    data[list] = kept[list].map((index) => entries[index]);
  }
  for (const name of ["multiplets", "normalisations"]) {
    const entries = data[name];
    if (typeof entries !== "object" || entries === null) continue;
    data[name] = Object.fromEntries(Object.entries(entries).filter(([key]) => !faulty(name, key)));
  }
  const known = Object.keys(studySchema.shape);
  for (const key of Object.keys(data)) if (!known.includes(key)) delete data[key];
  // A title and options do not matter to what else may be wrong.
  for (const { keys } of problems) {
    if (keys[0] === "title") data["title"] = "?";
    if (keys[0] === "fit" || keys[0] === "tables") delete data[keys[0]];
  }
  return { data, kept };
}

/** Names of hadrons that a study's own multiplets and mixed states have, as written, even where they have faults. */
function hadronNamesOf(plain: unknown): string[] {
  const names: string[] = [];
  const visit = (value: unknown): void => {
    if (typeof value !== "object" || value === null) return;
    for (const [key, item] of Object.entries(value)) {
      if (key === "name" && typeof item === "string") names.push(item);
      if (key === "chargeStates") names.push(...Object.keys(item ?? {}));
      visit(item);
    }
  };
  const { multiplets, mixing } = plain as Record<string, unknown>;
  visit([multiplets, mixing]);
  return names;
}

/** Positions of every value of the file, by path such as `measurements/0/value`. */
function positionsOf(syntax: StudySyntax): Map<string, SourcePosition> {
  const positions = new Map<string, SourcePosition>();
  const visit = (value: unknown, path: readonly (string | number)[]): void => {
    positions.set(path.join("/"), syntax.positionOf(path));
    if (Array.isArray(value)) for (const [index, item] of value.entries()) visit(item, [...path, index]);
    else if (typeof value === "object" && value !== null) {
      for (const [key, item] of Object.entries(value)) visit(item, [...path, key]);
    }
  };
  visit(syntax.plain, []);
  return positions;
}

function toStudy(document: StudyDocument, kept: Kept, syntax: StudySyntax, file: string): Study {
  const pathOf = (list: List, index: number) => `${list}/${kept[list][index]}`;
  const multiplets = Object.entries(document.multiplets).map(([id, multiplet]): [string, StudyMultiplet] => [
    id,
    {
      irrep: multiplet.irrep,
      ...multiplet.spinParity,
      baryonNumber: multiplet.baryonNumber ?? multiplet.spinParity.twoJ % 2,
      members: multiplet.members.map(withChargeStates),
    },
  ]);
  return {
    file,
    text: syntax.text,
    title: document.title,
    multiplets: Object.fromEntries(multiplets),
    mixing: document.mixing.map(({ bare, states, angle, angles, convention }, k) => ({
      path: pathOf("mixing", k),
      bare,
      states: states.map(withChargeStates),
      angles: angles ?? (angle === undefined ? [] : [angle]),
      convention,
    })),
    decays: document.decays.map(({ S, ...decay }, k) => ({
      ...decay,
      path: pathOf("decays", k),
      twoS: S,
      name: decay.name ?? "",
    })),
    quarkLine: document.quarkLine,
    measurements: document.measurements.map((written, k) =>
      toMeasurement(written, pathOf("measurements", k)),
    ),
    modes: document.modes.map((written, k) => toMode(written, pathOf("modes", k))),
    particles: document.particles.map(({ spinParity, isospin, ...particle }, k) => ({
      ...particle,
      ...spinParity,
      twoI: isospin,
      path: pathOf("particles", k),
    })),
    normalisations: Object.fromEntries(
      Object.entries(document.normalisations).map(([name, q]) => [name, q.value]),
    ),
    priors: document.priors.map((prior, k) => ({ ...prior, path: pathOf("priors", k) })),
    fit: document.fit,
    ...tableOptions(document.tables),
    hadronNames: hadronNamesOf(syntax.plain),
    positions: positionsOf(syntax),
  };
}

function tableOptions({ breaking, ...tables }: StudyDocument["tables"]): Pick<Study, "breaking" | "tables"> {
  return { breaking, tables };
}

function toMode(written: StudyDocument["modes"][number], path: string): StudyMode {
  const { mode, power, threshold, weak, phase, source } = written;
  const value: StudyMode["value"] =
    "remainder" in written
      ? { kind: "remainder", weight: written.remainder }
      : "width" in written
        ? { kind: "width", measured: written.width }
        : { kind: "fraction", measured: written.fraction };
  return { path, mode, value, power, threshold, weak, phase, source };
}

function withChargeStates<T extends { chargeStates?: StudyMember["chargeStates"] | undefined }>(member: T) {
  return { ...member, chargeStates: member.chargeStates ?? {} };
}

const KINDS = ["width", "fraction", "ratio", "product", "amplitude", "residue", "total", "axial"] as const;

function toMeasurement(written: StudyDocument["measurements"][number], path: string): StudyMeasurement {
  const kind = KINDS.find((name) => name in written)!;
  const channels = (written as Partial<Record<string, string | readonly string[]>>)[kind]!;
  const { value, source, use } = written;
  const sign = "sign" in written ? written.sign : 1;
  return {
    path,
    kind,
    channels: typeof channels === "string" ? [channels] : channels,
    value:
      typeof value === "string" ? { value: value === "+" ? 1 : -1, plus: 0, minus: 0, unit: "1" } : value,
    signOnly: typeof value === "string",
    sign: sign === "free" ? "free" : sign === "-" || sign === -1 ? -1 : 1,
    phase: "phase" in written ? written.phase : undefined,
    normalisation: "normalisation" in written ? written.normalisation : undefined,
    source,
    use,
  };
}
