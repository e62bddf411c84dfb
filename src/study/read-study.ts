import { type Document, isNode, LineCounter, parseDocument } from "yaml";
import type { z } from "zod";
import { InputError, type SourcePosition } from "../errors.js";
import { type StudyDocument, studySchema } from "./schema.js";
import type { Study, StudyMeasurement, StudyMember, StudyMultiplet } from "./study.js";

/** Largest study file read, in bytes. A study is written by hand; anything larger is another file. */
export const MAX_STUDY_BYTES = 1_000_000;

/**
 * A study read from the bytes of a YAML file and checked for form. Looks nothing up.
 *
 * @param bytes - the file's content, UTF-8
 * @param file - its name, for messages
 * @throws InputError listing every problem with line and column
 */
export function readStudy(bytes: Uint8Array, file: string): Study {
  const text = decode(bytes, file);
  const lines = new LineCounter();
  const document = parseDocument(text, { lineCounter: lines, prettyErrors: false });
  const problems = [...document.errors, ...document.warnings];
  if (problems.length > 0) {
    const listed = problems.map((problem) => {
      const { line, col } = lines.linePos(problem.pos[0]);
      return `${file}:${line}:${col}: not valid YAML: ${problem.message}`;
    });
    throw new InputError(listed.join("\n"));
  }
  const plain = toPlain(document, file);
  const parsed = studySchema.safeParse(plain);
  if (!parsed.success) throw new InputError(describeIssues(parsed.error.issues, document, lines, file));
  return toStudy(parsed.data, text, file, positionsOf(plain, document, lines, file));
}

function decode(bytes: Uint8Array, file: string): string {
  if (bytes.length > MAX_STUDY_BYTES) {
    throw new InputError(
      `${file}: expected a study of at most ${MAX_STUDY_BYTES} bytes, got ${bytes.length}. Is this the right file?`,
    );
  }
  let text: string;
  try {
    text = new TextDecoder("utf-8", { fatal: true }).decode(bytes);
  } catch (cause) {
    throw new InputError(
      `${file}: expected a YAML text in UTF-8, got bytes that are not. Is this the right file?`,
      { cause },
    );
  }
  if (text.trim() === "") throw new InputError(`${file}: expected a study, got an empty file.`);
  if (text.includes("\0"))
    throw new InputError(`${file}: expected a YAML text, got a binary file. Is this the right file?`);
  return text;
}

function toPlain(document: Document.Parsed, file: string): unknown {
  try {
    return document.toJS({ maxAliasCount: 100 });
  } catch (cause) {
    throw new InputError(
      `${file}: ${(cause as Error).message}. A study needs no YAML aliases; write the values out.`,
      { cause },
    );
  }
}

/** Position of the value at `path`, or of the nearest enclosing value that exists. */
function positionAt(
  path: readonly PropertyKey[],
  document: Document.Parsed,
  lines: LineCounter,
  file: string,
): SourcePosition {
  for (let length = path.length; length >= 0; length--) {
    const node = length === 0 ? document.contents : document.getIn(path.slice(0, length), true);
    if (isNode(node) && node.range) {
      const { line, col } = lines.linePos(node.range[0]);
      return { file, line, column: col };
    }
  }
  return { file, line: 1, column: 1 };
}

function positionsOf(
  plain: unknown,
  document: Document.Parsed,
  lines: LineCounter,
  file: string,
): Map<string, SourcePosition> {
  const positions = new Map<string, SourcePosition>();
  const visit = (value: unknown, path: readonly (string | number)[]): void => {
    positions.set(path.join("/"), positionAt(path, document, lines, file));
    if (Array.isArray(value)) for (const [index, item] of value.entries()) visit(item, [...path, index]);
    else if (typeof value === "object" && value !== null) {
      for (const [key, item] of Object.entries(value)) visit(item, [...path, key]);
    }
  };
  visit(plain, []);
  return positions;
}

type Issue = z.core.$ZodIssue;

/** One line per problem: where, what was expected, what came. */
function describeIssues(
  issues: readonly Issue[],
  document: Document.Parsed,
  lines: LineCounter,
  file: string,
): string {
  const flat = issues.flatMap((issue) => unfoldUnion(issue, document));
  return flat
    .map((issue) => {
      const { line, column } = positionAt(issue.path, document, lines, file);
      const where = issue.path.length === 0 ? "study" : issue.path.join("/");
      return `${file}:${line}:${column}: ${where}: ${issueText(issue, document)}.`;
    })
    .join("\n");
}

/** The alternative of a union that the value resembles most: the one with the fewest problems, keys unknown to it last. */
function unfoldUnion(issue: Issue, document: Document.Parsed): Issue[] {
  if (issue.code !== "invalid_union" || issue.errors.length === 0) return [issue];
  const wrongness = (branch: readonly Issue[]) =>
    branch.reduce(
      (sum, inner) =>
        sum +
        (inner.code === "unrecognized_keys" ? 10 * inner.keys.length : inner.path.length === 0 ? 100 : 1),
      0,
    );
  const best = [...issue.errors].sort((a, b) => wrongness(a) - wrongness(b))[0]!;
  if (wrongness(best) >= 100) return [issue];
  return best.flatMap((inner) =>
    unfoldUnion({ ...inner, path: [...issue.path, ...inner.path] } as Issue, document),
  );
}

function issueText(issue: Issue, document: Document.Parsed): string {
  const node = document.getIn(issue.path, true);
  const value: unknown = isNode(node) ? node.toJS(document) : node;
  const got =
    value === undefined ? "nothing" : typeof value === "number" ? String(value) : JSON.stringify(value);
  switch (issue.code) {
    case "custom":
      return issue.message;
    case "unrecognized_keys":
      return `unknown ${issue.keys.map((key) => `\`${key}\``).join(", ")}; check the spelling against the README`;
    case "invalid_value":
      return `expected ${issue.values.map((v) => JSON.stringify(v)).join(" or ")}, got ${got}`;
    case "too_small":
      return `expected at least ${String(issue.minimum)}${issue.origin === "array" ? " entries" : ""}, got ${got}`;
    case "too_big":
      return `expected at most ${String(issue.maximum)}${issue.origin === "array" ? " entries" : ""}, got ${got}`;
    case "invalid_type":
      return `expected ${article(issue.expected)}, got ${got}`;
    case "invalid_union":
      return `${issue.message}, got ${got}`;
    default:
      return issue.message;
  }
}

const TYPE_WORDS: Readonly<Record<string, string>> = {
  string: "a text",
  number: "a number",
  int: "a whole number",
  object: "a mapping (`key: value` lines)",
  record: "a mapping (`key: value` lines)",
  array: "a list",
  tuple: "a list of two",
};

function article(type: string): string {
  return TYPE_WORDS[type] ?? type;
}

function toStudy(
  document: StudyDocument,
  text: string,
  file: string,
  positions: Map<string, SourcePosition>,
): Study {
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
    text,
    title: document.title,
    multiplets: Object.fromEntries(multiplets),
    mixing: document.mixing.map(({ bare, states, angle, angles, convention }) => ({
      bare,
      states: states.map(withChargeStates),
      angles: angles ?? (angle === undefined ? [] : [angle]),
      convention,
    })),
    decays: document.decays.map(({ S, ...decay }) => ({ ...decay, twoS: S, name: decay.name ?? "" })),
    quarkLine: document.quarkLine,
    measurements: document.measurements.map(toMeasurement),
    normalisations: Object.fromEntries(
      Object.entries(document.normalisations).map(([name, q]) => [name, q.value]),
    ),
    priors: document.priors,
    fit: document.fit,
    breaking: document.tables.breaking,
    positions,
  };
}

function withChargeStates<T extends { chargeStates?: StudyMember["chargeStates"] | undefined }>(member: T) {
  return { ...member, chargeStates: member.chargeStates ?? {} };
}

const KINDS = ["width", "fraction", "ratio", "product", "amplitude", "residue", "total", "axial"] as const;

function toMeasurement(written: StudyDocument["measurements"][number]): StudyMeasurement {
  const kind = KINDS.find((name) => name in written)!;
  const channels = (written as Partial<Record<string, string | readonly string[]>>)[kind]!;
  const { value, source, use } = written;
  const sign = "sign" in written ? written.sign : 1;
  return {
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
