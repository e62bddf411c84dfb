import type { Observable } from "./model.js";
import type { Problems } from "./problems.js";

/** An observable with the path where it is written. */
export interface WrittenObservable {
  readonly path: string;
  readonly observable: Observable;
}

/**
 * Notes values that are written twice: the same quantity with the same value and errors from the same source, which would
 * count twice. What only the fit uses and what only the tables use do not meet.
 */
export function noteRepeated(written: readonly WrittenObservable[], problems: Problems): void {
  const earlier = new Map<string, WrittenObservable[]>();
  for (const each of written) {
    const { path, observable } = each;
    const key = keyOf(observable);
    const twin = earlier.get(key)?.find((other) => usesMeet(other.observable, observable));
    earlier.set(key, [...(earlier.get(key) ?? []), each]);
    if (twin === undefined) continue;
    const { line } = twin.observable.position;
    problems.add(
      path,
      `expected each measurement once, got ${observable.label} with the value and source of line ${line} again. Take one of them out; if both were measured, say in \`source\` what tells them apart.`,
    );
  }
}

/** What two entries have in common if they are the same measurement; spelling and order of daughters do not matter. */
function keyOf({ quantum, measured, signOnly, source }: Observable): string {
  return JSON.stringify([quantum, measured, signOnly, source.trim().replace(/\s+/g, " ")]);
}

function usesMeet(a: Observable, b: Observable): boolean {
  return a.use === b.use || a.use === "both" || b.use === "both";
}
