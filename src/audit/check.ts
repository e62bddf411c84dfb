/** What one check of the audit found. */
export interface AuditCheck {
  /** e.g. `published/pdg-isoscalar-8a-from-8x8.json` or `identity/orthonormality`. */
  readonly name: string;
  /** What was compared with what, in words. */
  readonly what: string;
  /** Where the expectation comes from: a citation, or the identity. */
  readonly source: string;
  /** How many values were compared. */
  readonly checked: number;
  /** The largest deviation found, in words; `exact` where nothing deviates. */
  readonly worst: string;
  /** One line for each value that is wrong; empty if the check holds. */
  readonly differences: readonly string[];
}

/** A check before it runs. */
export interface PlannedCheck {
  readonly name: string;
  run(): AuditCheck;
}

/** Whether every check holds. */
export function allHold(checks: readonly AuditCheck[]): boolean {
  return checks.every(({ differences }) => differences.length === 0);
}

/** Collects the differences of one check while it runs. */
export class Findings {
  readonly differences: string[] = [];
  /** Differences with a stated reason. */
  readonly explained: string[] = [];
  checked = 0;

  /** Counts one comparison, and notes it where it fails. */
  compare(holds: boolean, difference: () => string): void {
    this.checked++;
    if (!holds) this.differences.push(difference());
  }

  /** The check, of exact values: there is no deviation but a difference. */
  exact(name: string, what: string, source: string): AuditCheck {
    const { differences, checked } = this;
    const worst = differences.length === 0 ? "exact" : differences[0]!;
    return { name, what, source, checked, worst, differences };
  }
}
