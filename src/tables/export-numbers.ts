import { InputError } from "../errors.js";
import type { couplet } from "../gen/couplet.js";
import { nearestNames } from "../nearest-names.js";
import { LARGEST_ID } from "./export-accord-lines.js";

type Hadron = couplet.v1.Hadron.$Properties;

/** A user's numbers for hadrons that have none in the published scheme, by name. */
export type OwnNumbers = ReadonlyMap<string, number>;

/**
 * Monte Carlo numbers read from texts `NAME=ID`.
 *
 * @throws InputError for a text of another form, a number that does not fit, or a name given twice
 */
export function parseOwnNumbers(texts: readonly string[]): OwnNumbers {
  const numbers = new Map<string, number>();
  for (const text of texts) {
    const { name, id } = /^(?<name>.+)=(?<id>[+-]?\d{1,9})$/.exec(text)?.groups ?? {};
    if (name === undefined || Number(id) === 0) {
      throw new InputError(
        `--number: expected NAME=ID with an integer of at most nine digits, not 0, got ${JSON.stringify(text)}.`,
      );
    }
    if (numbers.has(name)) throw new InputError(`--number: expected one number for ${name}, got several.`);
    numbers.set(name, Number(id));
  }
  return numbers;
}

/** Monte Carlo numbers of a table's hadrons, by name: the published ones, and a user's own. */
export class HadronNumbers {
  readonly #hadrons = new Map<string, Hadron>();
  readonly #conjugates = new Map<string, string>();
  readonly #numbers = new Map<string, number>();

  /**
   * @param hadrons - every hadron of the table
   * @param own - also gives the antiparticle of a hadron the opposite number
   * @throws InputError for a name that is not in the table, or one number for two hadrons
   */
  constructor(hadrons: readonly Hadron[], own: OwnNumbers) {
    for (const hadron of hadrons) this.#add(hadron);
    for (const [name, id] of own) {
      if (!this.#hadrons.has(name)) refuseName(name, [...this.#hadrons.keys()]);
      this.#numbers.set(name, id);
      const antiparticle = this.#conjugates.get(name);
      if (antiparticle !== undefined && !own.has(antiparticle)) this.#numbers.set(antiparticle, -id);
    }
    requireDistinct(this.#numbers);
  }

  #add(hadron: Hadron): void {
    const { mcNumber, antiparticle } = hadron;
    const name = hadron.name!;
    this.#hadrons.set(name, hadron);
    if (mcNumber != null) this.#numbers.set(name, mcNumber);
    if (antiparticle == null) return;
    this.#conjugates.set(name, antiparticle).set(antiparticle, name);
    if (!this.#hadrons.has(antiparticle)) this.#hadrons.set(antiparticle, hadron);
    if (mcNumber != null && !this.#numbers.has(antiparticle)) this.#numbers.set(antiparticle, -mcNumber);
  }

  /** Mass of a hadron or of an antiparticle, in MeV; NaN for one that the table does not know. */
  massMeV(name: string): number {
    return this.#hadrons.get(name)?.mass ?? Number.NaN;
  }

  /** The number of a hadron, or of the antiparticle of one. */
  of(name: string): number | undefined {
    return this.#numbers.get(name);
  }

  /** Name of the antiparticle; its own for a hadron that is its own. */
  conjugateName(name: string): string {
    return this.#conjugates.get(name) ?? name;
  }

  /**
   * Refuses hadrons without a number, all of them at once.
   *
   * @throws InputError naming them, with how to give them numbers
   */
  requireAll(names: readonly string[], file: string): void {
    const missing = [...new Set(names)].filter((name) => this.of(name) === undefined);
    if (missing.length === 0) return;
    const example = missing.map((name) => `--number '${name}=ID'`).join(" ");
    throw new InputError(
      `${file}: expected a Monte Carlo number for every hadron, got none for ${missing.join(", ")}. Give them numbers that nothing else has in your production: ${example}`,
    );
  }
}

function refuseName(name: string, known: readonly string[]): never {
  const nearest = nearestNames(name, known);
  throw new InputError(
    `--number: expected a hadron of this table, got ${JSON.stringify(name)}.${nearest.length === 0 ? "" : ` Nearest: ${nearest.join(", ")}.`}`,
  );
}

function requireDistinct(numbers: ReadonlyMap<string, number>): void {
  const owner = new Map<number, string>();
  for (const [name, id] of numbers) {
    const other = owner.get(id);
    if (other !== undefined) {
      throw new InputError(
        `--number: expected a number of its own for each hadron, got ${id} for ${other} and ${name}. Choose another with --number.`,
      );
    }
    if (Math.abs(id) > LARGEST_ID) {
      throw new InputError(`${name}: expected a Monte Carlo number of at most nine digits, got ${id}.`);
    }
    owner.set(id, name);
  }
}
