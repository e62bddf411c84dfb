import type { FormProblem } from "./form-problems.js";
import { nameProblem } from "./names.js";
import type { StudySyntax } from "./syntax.js";

/**
 * What is wrong with the keys that a study chooses itself: ids of multiplets, and `__proto__` wherever it stands.
 *
 * The form check does not see them: it leaves `__proto__` out without a word.
 */
export function keyProblems(syntax: StudySyntax): FormProblem[] {
  const problems: FormProblem[] = [];
  const note = (around: readonly (string | number)[], key: string, text: string) =>
    problems.push({
      keys: [...around, key],
      path: [...around, key].join("/"),
      position: syntax.positionOfKey(around, key),
      text: `${text}.`,
    });
  // An alias may stand for something it is in; such a study is refused by its form.
  const visited = new Set<unknown>();
  const visit = (value: unknown, path: readonly (string | number)[]): void => {
    if (typeof value !== "object" || value === null || visited.has(value)) return;
    visited.add(value);
    if (Array.isArray(value)) for (const [index, item] of value.entries()) visit(item, [...path, index]);
    else {
      for (const [key, item] of Object.entries(value)) {
        const isId = path.length === 1 && path[0] === "multiplets";
        const problem = isId || key === "__proto__" ? nameProblem(key) : undefined;
        if (problem !== undefined) note(path, key, problem);
        visit(item, [...path, key]);
      }
    }
  };
  visit(syntax.plain, []);
  return problems;
}
