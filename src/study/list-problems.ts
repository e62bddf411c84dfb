import type { StudyProblem } from "./study.js";

/** Problems as the lines of a message, in the order of the file; each once. */
export function listProblems(problems: readonly StudyProblem[]): string {
  const sorted = [...problems].sort(
    ({ position: a }, { position: b }) => a.line - b.line || a.column - b.column,
  );
  const lines = sorted.map(({ position: { file, line, column }, path, text }) => {
    return `${file}:${line}:${column}: ${path === "" ? "" : `${path}: `}${text}`;
  });
  return [...new Set(lines)].join("\n");
}
