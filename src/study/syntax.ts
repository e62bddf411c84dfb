import { type Document, isMap, isNode, isScalar, LineCounter, parseDocument, visit } from "yaml";
import { InputError, type SourcePosition } from "../errors.js";
import { listProblems } from "./list-problems.js";
import type { StudyProblem } from "./study.js";

/** Largest study file read, in bytes. A study is written by hand; anything larger is another file. */
export const MAX_STUDY_BYTES = 1_000_000;

/** More copies than this that aliases stand for are a mistake or an attack. */
const MAX_ALIASES = 100;

/** A YAML text as plain data, with the position of each value. */
export interface StudySyntax {
  readonly text: string;
  /** Undefined where the text is not YAML at all. */
  readonly plain: unknown;
  /** What is wrong that does not hinder reading on, such as a key written twice. */
  readonly problems: readonly StudyProblem[];
  /** Position of the value at `path`, or of the nearest value around it that exists. */
  positionOf(path: readonly PropertyKey[]): SourcePosition;
  /** Position of a key in the mapping at `path`. */
  positionOfKey(path: readonly PropertyKey[], key: string): SourcePosition;
}

/**
 * The YAML in a file's bytes.
 *
 * @param bytes - UTF-8; reading stops at `MAX_STUDY_BYTES`
 * @throws InputError if the file is no YAML text; lists every fault with line and column
 */
export function readSyntax(bytes: Uint8Array, file: string): StudySyntax {
  const text = decode(bytes, file);
  const lines = new LineCounter();
  const document = parseDocument(text, { lineCounter: lines, prettyErrors: false });
  const at = (offset: number): SourcePosition => {
    const { line, col } = lines.linePos(offset);
    return { file, line, column: col };
  };
  const faults = [...document.errors, ...document.warnings];
  // The parser calls itself for each level, and notes it where that exhausts the stack.
  if (faults.some(({ message }) => message.includes("call stack"))) {
    throw new InputError(`${file}: expected a study, got lists nested too deeply. Is this the right file?`);
  }
  const problems = faults.map(({ code, message, pos: [offset] }): StudyProblem => {
    const twice = code === "DUPLICATE_KEY";
    const reason = twice ? "expected each key once, got it again. Take one of them out." : `${message}.`;
    return { path: "", position: at(offset), text: `not valid YAML: ${reason}` };
  });
  if (faults.some(({ code }) => code !== "DUPLICATE_KEY")) throw new InputError(listProblems(problems));
  keepNumbersThatOverflow(document);
  const plain = toPlain(document, at);
  if (plain === null) throw emptyFile(file);
  const positionOf = (path: readonly PropertyKey[]): SourcePosition => {
    for (let length = path.length; length > 0; length--) {
      const node = document.getIn(path.slice(0, length), true);
      if (isNode(node) && node.range) return at(node.range[0]);
    }
    return at(document.contents?.range?.[0] ?? 0);
  };
  return {
    text,
    plain,
    problems,
    positionOf,
    positionOfKey(path, key) {
      const map = path.length === 0 ? document.contents : document.getIn(path, true);
      const pair = isMap(map) ? map.items.find((item) => isScalar(item.key) && item.key.value === key) : null;
      return isScalar(pair?.key) && pair.key.range ? at(pair.key.range[0]) : positionOf(path);
    },
  };
}

function decode(bytes: Uint8Array, file: string): string {
  if (bytes.length > MAX_STUDY_BYTES) {
    throw new InputError(
      `${file}: expected a study of at most ${MAX_STUDY_BYTES} bytes, got more. Is this the right file?`,
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
  if (text.trim() === "") throw emptyFile(file);
  if (text.includes("\0"))
    throw new InputError(`${file}: expected a YAML text, got a binary file. Is this the right file?`);
  return text;
}

function emptyFile(file: string): InputError {
  return new InputError(`${file}: expected a study, got an empty file. Start one with \`couplet new NAME\`.`);
}

/** A number such as 1e999 stays the text it is, so that messages can show it; no check lets it pass as a number. */
function keepNumbersThatOverflow(document: Document.Parsed): void {
  visit(document, {
    Scalar(_, node) {
      if (typeof node.value === "number" && !Number.isFinite(node.value)) node.value = node.source ?? "";
    },
  });
}

function toPlain(document: Document.Parsed, at: (offset: number) => SourcePosition): unknown {
  try {
    return document.toJS({ maxAliasCount: MAX_ALIASES });
  } catch (cause) {
    const { file, line, column } = at(offendingAlias(document));
    const reason = (cause as Error).message.startsWith("Unresolved")
      ? "expected a value, got an alias (`*name`) of no anchor"
      : `expected values, got aliases (\`*name\`) that stand for more than ${MAX_ALIASES} copies`;
    throw new InputError(
      `${file}:${line}:${column}: ${reason}. A study needs no aliases; write the values out.`,
      {
        cause,
      },
    );
  }
}

/** Offset of the first alias without an anchor, else of the first alias. */
function offendingAlias(document: Document.Parsed): number {
  let first: number | undefined;
  visit(document, {
    Alias(_, node) {
      const offset = node.range?.[0] ?? 0;
      if (node.resolve(document) === undefined) {
        first = offset;
        return visit.BREAK;
      }
      first ??= offset;
      return undefined;
    },
  });
  return first ?? 0;
}
