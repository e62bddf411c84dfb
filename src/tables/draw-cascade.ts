import { InputError, TableError } from "../errors.js";
import { couplet } from "../gen/couplet.js";
import { requirePositive } from "../require.js";
import { breakupMomentumMeV } from "../widths/breakup-momentum.js";
import { drawMassesJointly, lowestDrawnMeV, type MassSource } from "../widths/draw-decay.js";
import { drawMass } from "../widths/draw-mass.js";
import {
  daughterOf,
  factorOf,
  type HadronsByName,
  type RowsEvaluator,
  rowsEvaluator,
  tableHadrons,
} from "./evaluate-rows.js";
import type { Factor } from "./row-laws.js";

import v1 = couplet.v1;

/** One particle of a cascade. */
export interface CascadeParticle {
  readonly name: string;
  readonly massMeV: number;
  /** Place of the mother in the list; -1 for the first particle. */
  readonly mother: number;
  /**
   * What becomes of it: `decayed`; `left` where the table has no rows for it (stable, flies on, or left to the generator);
   * `undecayable` where the row drawn has no daughters (a remainder); `closed` where no row is open at its mass.
   */
  readonly end: "decayed" | "left" | "undecayable" | "closed";
  /** The row drawn, of a particle that decayed or is undecayable. */
  readonly row?: v1.Row.$Properties;
  /** True where the row is one of the antiparticle: every daughter is the antiparticle of the row's. */
  readonly conjugate: boolean;
  /** Places of the daughters in the list, in the order of the row. */
  readonly daughters: readonly number[];
}

/** Draws whole cascades from one table. */
export interface CascadeDrawer {
  /**
   * A cascade down to particles without rows: a list in which every mother comes before her daughters.
   *
   * Random numbers are used in this order: for the first particle's mass one, if it has a line shape and no mass is
   * given; then for every particle with rows, in the order of the list, one for the row and those of
   * `drawMassesJointly` for its daughters. A row is never drawn again. The sum of the daughters' masses is always below
   * the mother's mass. Momenta are not drawn.
   * @param name - a parent of the table, or the antiparticle of one if the table says that these are implied
   * @param uniform - independent numbers in [0, 1)
   * @param massMeV - of the first particle; drawn from its line shape if not given, nominal if it has none
   * @throws InputError for a name without rows, a mass that is not a finite number > 0 or past the end of a grid
   * @throws TableError for a table whose decays do not end
   */
  draw(name: string, uniform: () => number, massMeV?: number): CascadeParticle[];
}

/** A daughter narrower than this has its nominal mass, as for the widths in the table. */
const NARROW_MEV = 1;

/** No table of real hadrons comes near this. */
const MOST_PARTICLES = 1000;

interface ReadyRow {
  readonly row: v1.Row.$Properties;
  readonly sources: readonly MassSource[];
  readonly lowestMeV: number;
  /** What the chance of the daughters' masses is weighted with at a mass of the parent. */
  readonly K: (parentMeV: number, massesMeV: readonly number[]) => number;
}

interface ReadyParent {
  readonly hadron: v1.Hadron.$Properties;
  readonly rows: readonly ReadyRow[];
  readonly evaluator: RowsEvaluator;
}

/**
 * A drawer of whole cascades from a decay table, made ready once.
 *
 * A particle's row is drawn with the partial widths at its mass, of the rows whose daughters can be light enough. The
 * masses of a row's daughters are drawn jointly with chance rho(w1) ... rho(wn) K: the daughters' line shapes in the table
 * times the row's K, the sum over its waves of strength times width model at these masses; for a row without waves
 * (M - w1 - ... - wn) to its power. Daughters without a line shape, or narrower than 1 MeV, have their nominal mass.
 * @throws TableError for a row this version cannot evaluate, or one with a single daughter
 */
export function cascadeDrawer(tables: v1.DecayTables): CascadeDrawer {
  const hadrons = tableHadrons(tables);
  const parents = new Map(
    tables.parents.map((parent) => [parent.hadron?.name ?? "", readyParent(parent, hadrons)]),
  );
  const antiparticles = new Map(
    [...hadrons.values()].flatMap(({ name, antiparticle }) =>
      antiparticle != null && name != null ? [[antiparticle, name] as const] : [],
    ),
  );
  const conjugateOf = (name: string) => hadrons.get(name)?.antiparticle ?? antiparticles.get(name) ?? name;
  const implied = tables.header?.policies?.antiparticles === "implied";
  const rowsOf = (name: string) => {
    const own = parents.get(name);
    if (own !== undefined || !implied) return { parent: own, conjugate: false };
    return { parent: parents.get(conjugateOf(name)), conjugate: true };
  };
  return {
    draw(name, uniform, massMeV) {
      const { parent: first } = rowsOf(name);
      if (first === undefined) {
        const known = [...parents.keys()].join(", ");
        throw new InputError(`no rows for "${name}" in this table; there are: ${known}`);
      }
      const shape = shapeOf(first.hadron);
      if (massMeV !== undefined) requirePositive("mass of the parent", massMeV, "Give the mass in MeV.");
      const mass = massMeV ?? (typeof shape === "number" ? shape : drawMass(shape, uniform()));
      const cascade: CascadeParticle[] = [particle(name, mass, -1)];
      for (let k = 0; k < cascade.length; k++) {
        const { parent, conjugate } = rowsOf(cascade[k]!.name);
        if (parent === undefined) continue;
        const decay = drawDecay(parent, cascade[k]!.massMeV, uniform);
        const daughters = decay.masses.map((daughterMeV, d) => {
          const daughter = decay.row!.daughters![d]!.name!;
          return cascade.push(particle(conjugate ? conjugateOf(daughter) : daughter, daughterMeV, k)) - 1;
        });
        const { end, row } = decay;
        cascade[k] = { ...cascade[k]!, end, conjugate, daughters, ...(row === undefined ? {} : { row }) };
        if (cascade.length > MOST_PARTICLES)
          throw new TableError(`${name}: expected decays that end, got ${MOST_PARTICLES} particles`);
      }
      return cascade;
    },
  };
}

function particle(name: string, massMeV: number, mother: number): CascadeParticle {
  return { name, massMeV, mother, end: "left", conjugate: false, daughters: [] };
}

/** The row drawn at a mass, and the masses of its daughters. */
function drawDecay(
  { rows, evaluator }: ReadyParent,
  massMeV: number,
  uniform: () => number,
): Pick<CascadeParticle, "end" | "row"> & { readonly masses: readonly number[] } {
  const u = uniform();
  const widths = new Array<number>(evaluator.rowCount).fill(0);
  // A mass from the very end of a line shape may be 0.
  if (massMeV > 0) evaluator.widthsInto(massMeV, widths, 0);
  const open = widths.map((width, k) => (rows[k]!.lowestMeV < massMeV ? width : 0));
  const wanted = u * open.reduce((total, width) => total + width, 0);
  let sum = 0;
  let drawn: ReadyRow | undefined;
  for (const [k, width] of open.entries()) {
    if (width === 0) continue;
    sum += width;
    drawn = rows[k];
    if (wanted < sum) break;
  }
  if (drawn === undefined) return { end: "closed", masses: [] };
  const { row, sources, K } = drawn;
  if (sources.length === 0) return { end: "undecayable", row, masses: [] };
  const masses = drawMassesJointly(sources, (of) => K(massMeV, of), massMeV, uniform);
  return { end: "decayed", row, masses };
}

function readyParent(parent: v1.Parent.$Properties, hadrons: HadronsByName): ReadyParent {
  return {
    hadron: parent.hadron ?? {},
    rows: (parent.rows ?? []).map((row) => readyRow(parent, row, hadrons)),
    evaluator: rowsEvaluator(parent, hadrons),
  };
}

function readyRow(parent: v1.Parent.$Properties, row: v1.Row.$Properties, hadrons: HadronsByName): ReadyRow {
  const daughters = (row.daughters ?? []).map((daughter) => daughterOf(row, daughter, hadrons));
  if (daughters.length === 1) throw new TableError(`${row.id}: expected two daughters or more, got 1`);
  const sources = daughters.map((hadron) =>
    hadron.width != null && hadron.width < NARROW_MEV ? hadron.mass! : shapeOf(hadron),
  );
  const lowestMeV = sources.reduce<number>((sum, source) => sum + lowestDrawnMeV(source), 0);
  return { row, sources, lowestMeV, K: factorOfRow(parent, row, daughters) };
}

/** The line shape of a hadron, or its nominal mass if it has none. */
function shapeOf({ name, mass, lineShape }: v1.Hadron.$Properties): MassSource {
  if (lineShape == null) return mass ?? Number.NaN;
  const { low, distances, cumulative, power } = lineShape;
  const points = distances?.length ?? 0;
  if (points < 2 || points !== cumulative?.length || !(low! >= 0) || !(power! > 0)) {
    throw new TableError(
      `${name}: line shape: expected distances and chances of two points or more, got others`,
    );
  }
  return { originMeV: low!, distancesMeV: distances!, cumulative, power: power! };
}

function factorOfRow(
  parent: v1.Parent.$Properties,
  row: v1.Row.$Properties,
  daughters: readonly v1.Hadron.$Properties[],
): ReadyRow["K"] {
  const waves = row.waves ?? [];
  if (waves.length === 0 || daughters.length !== 2) {
    const power = row.power ?? 0;
    return (parentMeV, masses) => (parentMeV - masses.reduce((sum, mass) => sum + mass, 0)) ** power;
  }
  const strengths = waves.map((wave) => strengthOf(row, wave));
  const sum = strengths.reduce((total, strength) => total + strength, 0);
  // Without strengths the waves count alike.
  const known = sum > 0 && Number.isFinite(sum);
  const terms = waves.map((wave, w): [number, Factor] => [
    known ? strengths[w]! : 1,
    factorOf(row, wave, [parent.hadron!, ...daughters]),
  ]);
  return (parentMeV, [firstMeV, secondMeV]) => {
    const momentumMeV = breakupMomentumMeV(parentMeV, firstMeV!, secondMeV!);
    if (momentumMeV === 0) return 0;
    const kinematics = { parentMeV, firstMeV: firstMeV!, secondMeV: secondMeV!, momentumMeV };
    let value = 0;
    for (const [strength, factor] of terms) value += strength * factor(kinematics);
    return value;
  };
}

/** What K of a wave is multiplied with to give its width at the nominal mass, or in the fit where that is 0. */
function strengthOf(row: v1.Row.$Properties, wave: v1.Wave.$Properties): number {
  const width = (wave.re ?? 0) ** 2 + (wave.im ?? 0) ** 2;
  const factor = wave.kinematicFactor ?? 0;
  return width > 0 && factor > 0
    ? width / factor
    : (row.identicalFactor ?? 1) * (wave.flavourAmplitude ?? 0) ** 2;
}
