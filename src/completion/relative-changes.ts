import type { ErrorSpace, Gradient } from "./error-space.js";
import type { Estimate } from "./tables.js";
import type { Entry } from "./total-width.js";

/** What moves together, and is named together: the rows of one measurement, or of one predicted isospin channel. */
export function groupOf(entry: Entry): string {
  return entry.kind === "predicted" ? entry.group : `value ${entry.observable}`;
}

/** A fraction to first order: its gradient, and the weights with which the entries' errors from breaking enter it. */
export interface LinearFraction {
  readonly value: number;
  readonly gradient: Gradient;
  readonly broken: readonly number[];
}

/** How the total width moves relative to itself, which is how the fraction of a row moves that has no width yet. */
export type RelativeTotal = Omit<LinearFraction, "value">;

/** Errors of the data (two sides) and of breaking. */
export type LinearErrors = Pick<Estimate, "plus" | "minus" | "breaking">;

/**
 * The relative changes d_j of a parent's fractions, to first order; with one remainder after the entries if there is one.
 *
 * An entry that is closed at the nominal mass has the relative change of its squared leading amplitude, less that of the
 * total width.
 */
export class RelativeChanges {
  constructor(
    private readonly space: ErrorSpace,
    private readonly entries: readonly Entry[],
    /** Error of each entry's fraction from breaking. */
    private readonly breaking: readonly number[],
    private readonly fractions: readonly LinearFraction[],
    private readonly total: RelativeTotal,
  ) {}

  /** Errors of a quantity x with dx = sum_j weights[j] d_j; fractions without any width do not move it. */
  errors(weights: readonly number[]): LinearErrors {
    const terms: { weight: number; gradient: Gradient }[] = [];
    const broken = new Map<string, number>();
    const add = (group: string, change: number) => broken.set(group, (broken.get(group) ?? 0) + change);
    const addTerm = (weight: number, { gradient, broken: parts }: RelativeTotal) => {
      terms.push({ weight, gradient });
      for (const [k, entry] of this.entries.entries())
        add(groupOf(entry), weight * parts[k]! * this.breaking[k]!);
    };
    for (const [j, fraction] of this.fractions.entries()) {
      const weight = weights[j]!;
      const entry = this.entries[j];
      if (weight === 0) continue;
      if (fraction.value > 0) addTerm(weight / fraction.value, fraction);
      else if (entry?.kind === "predicted" && entry.closed !== undefined) {
        terms.push({ weight, gradient: this.space.ofParameters(entry.closed.gradient) });
        add(entry.group, weight * entry.closed.breaking);
        addTerm(-weight, this.total);
      }
    }
    const gradient = this.space.combination(
      terms.map(({ weight }) => weight),
      terms.map((term) => term.gradient),
    );
    return { ...this.space.errors(gradient), breaking: Math.hypot(...broken.values()) };
  }
}
