import { InputError, type SourcePosition } from "../errors.js";
import type { Study } from "../study/study.js";

/** Collects what is wrong with a study, so that the user sees all of it at once. */
export class Problems {
  private readonly texts: string[] = [];

  constructor(private readonly study: Study) {}

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
    const { file, line, column } = this.positionOf(path);
    this.texts.push(`${file}:${line}:${column}: ${path}: ${text}`);
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

  /** @throws InputError with everything noted, if anything was. */
  throwIfAny(): void {
    if (this.texts.length > 0) throw new InputError(this.texts.join("\n"));
  }
}
