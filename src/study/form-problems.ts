import type { z } from "zod";
import { shown } from "../require.js";
import type { StudyProblem } from "./study.js";
import type { StudySyntax } from "./syntax.js";

type Issue = z.core.$ZodIssue;

/** Where a form problem lies in the data, as keys and indices. */
export interface FormProblem extends StudyProblem {
  readonly keys: readonly PropertyKey[];
}

/** The issues of a form check in words, each with where it is, what was expected and what came. */
export function formProblems(issues: readonly Issue[], syntax: StudySyntax): FormProblem[] {
  return issues
    .flatMap((issue) => unfoldUnion(issue, syntax.plain))
    .map((issue) => {
      const keys = issue.path;
      const [unknown] = issue.code === "unrecognized_keys" ? issue.keys : [];
      return {
        keys,
        path: keys.length === 0 ? "study" : keys.join("/"),
        position: unknown === undefined ? syntax.positionOf(keys) : syntax.positionOfKey(keys, unknown),
        text: `${issueText(issue, valueAt(syntax.plain, keys))}.`,
      };
    });
}

function valueAt(plain: unknown, keys: readonly PropertyKey[]): unknown {
  return keys.reduce<unknown>(
    (value, key) => (value as Record<PropertyKey, unknown> | undefined)?.[key],
    plain,
  );
}

/**
 * The alternative of a union that the value resembles most: the one with the fewest problems, keys unknown to it last. The
 * union's own words stand where no alternative comes near.
 */
function unfoldUnion(issue: Issue, plain: unknown): Issue[] {
  if (issue.code !== "invalid_union" || issue.errors.length === 0) return [issue];
  const value = valueAt(plain, issue.path);
  const best = [...issue.errors].sort((a, b) => wrongness(a, value) - wrongness(b, value))[0]!;
  if (wrongness(best, value) >= FAR) return [issue];
  return best.flatMap((inner) =>
    unfoldUnion({ ...inner, path: [...issue.path, ...inner.path] } as Issue, plain),
  );
}

const FAR = 100;

function wrongness(branch: readonly Issue[], value: unknown): number {
  const weights = branch.map((issue): number => {
    if (issue.code === "unrecognized_keys") return 10 * issue.keys.length;
    if (issue.path.length > 0) return 1;
    // A number with a fault is best told what the fault is.
    return issue.code === "custom" && /^\s*[-+.<\d]/.test(String(value)) ? 1 : FAR;
  });
  return weights.reduce((sum, weight) => sum + weight, 0);
}

function issueText(issue: Issue, value: unknown): string {
  const got = shown(value);
  switch (issue.code) {
    case "custom":
    case "unrecognized_keys":
      return issue.message;
    case "invalid_value":
      return `expected ${issue.values.map((v) => JSON.stringify(v)).join(" or ")}, got ${got}`;
    case "too_small":
      return `expected at least ${count(issue.minimum, issue.origin)}, got ${got}`;
    case "too_big":
      return `expected at most ${count(issue.maximum, issue.origin)}, got ${got}`;
    case "invalid_type":
      return `expected ${TYPE_WORDS[issue.expected] ?? issue.expected}, got ${got}`;
    default:
      return `${issue.message}, got ${got}`;
  }
}

function count(limit: number | bigint, origin: string): string {
  const things: Readonly<Record<string, string>> = { array: "entry", string: "character" };
  const thing = things[origin];
  if (thing === undefined) return String(limit);
  return `${limit} ${Number(limit) === 1 ? thing : thing.replace(/y$/, "ie") + "s"}`;
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
