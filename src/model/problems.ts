import { InputError, type SourcePosition } from "../errors.js";
import { listProblems } from "../study/list-problems.js";
import type { Study, StudyProblem } from "../study/study.js";

/** Collects what is wrong with a study, so that the user sees all of it at once. */
export class Problems {
  private readonly noted: StudyProblem[];

  /** @param earlier - what is known to be wrong with the study's form */
  constructor(
    private readonly study: Study,
    earlier: readonly StudyProblem[] = [],
  ) {
    this.noted = [...earlier];
  }

  /** Position of the value at a path of the study, e.g. `measurements/0/value`. */
  positionOf(path: string): SourcePosition {
    for (let at = path; at !== ""; at = at.slice(0, Math.max(0, at.lastIndexOf("/")))) {
      const position = this.study.positions.get(at);
      if (position !== undefined) return position;
    }
    return { file: this.study.file, line: 1, column: 1 };
  }

  /** Notes that the value at `path` is wrong. */
  add(path: string, text: string): void {
    this.noted.push({ path, position: this.positionOf(path), text });
  }

  /** The result of `attempt`, or undefined with the InputError noted at `path`. */
  attempt<T>(path: string, attempt: () => T): T | undefined {
    try {
      return attempt();
    } catch (error) {
      if (!(error instanceof InputError)) throw error;
      this.add(path, error.message);
      return undefined;
    }
  }

  /** Whether anything was noted at the value of `path` or within it; anywhere, without a path. */
  has(path = ""): boolean {
    return this.noted.some((problem) => path === "" || `${problem.path}/`.startsWith(`${path}/`));
  }

  /** @throws InputError with everything noted, if anything was. */
  throwIfAny(): void {
    if (this.noted.length > 0) throw new InputError(listProblems(this.noted));
  }
}
