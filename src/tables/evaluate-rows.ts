import { InputError, TableError } from "../errors.js";
import { couplet } from "../gen/couplet.js";
import { refuse, requirePositive } from "../require.js";
import { breakupMomentumMeV } from "../widths/breakup-momentum.js";
import { widthModel, widthModelDefinitions } from "../widths/width-model.js";
import type { Vertex } from "../widths/width-model-definition.js";
import { ClosedForm, type Factor, PowerOfDistance, type RowWidth, Tabulated } from "./row-laws.js";
import { optionValues } from "./wave-options.js";

import v1 = couplet.v1;

/** Partial widths of one parent's rows against its mass. */
export interface RowsEvaluator {
  /** Number of rows, in the order of the decay table. */
  readonly rowCount: number;
  /**
   * Writes the partial width of every row into `widths` from `offset` on, and returns their sum, in MeV.
   *
   * Each is >= 0 and finite; 0 at and below the row's threshold.
   * @throws InputError for a mass that is not a finite number > 0, or so large that a width overflows
   */
  widthsInto(massMeV: number, widths: number[] | Float64Array, offset: number): number;
  /**
   * The same for many masses: widths mass by mass, and their sum for each mass into `totals`.
   *
   * Row after row, so that each row's formula meets all masses in one loop.
   * @throws InputError as `widthsInto`
   */
  manyInto(massesMeV: ArrayLike<number>, widths: Float64Array, totals: Float64Array): void;
}

/** Hadrons by their names. */
export type HadronsByName = ReadonlyMap<string, v1.Hadron.$Properties>;

/** The hadrons of a decay table by name: its parents and its externals. */
export function tableHadrons(tables: v1.DecayTables): HadronsByName {
  const hadrons = [...tables.externals, ...tables.parents.map(({ hadron }) => hadron)];
  return new Map(hadrons.map((hadron) => [hadron.name, hadron]));
}

/**
 * The evaluator of a parent's rows at any mass, prepared once.
 *
 * The partial width of a row at mass m is the sum over its waves of (re^2 + im^2) K(m)/K(m0), with m0 the nominal mass
 * and K the wave's width model at the masses of the table's hadrons; where K(m0) = 0, so that re = im = 0, it is
 * identicalFactor flavourAmplitude^2 K(m). So at m0 it is the row's width, measured or predicted, and a measured row
 * takes its shape from the model. A row flagged as folded, or with a width at m0 where K(m0) = 0, follows its grid. A
 * row with a power grows with that power of the distance from its threshold; one with neither is constant above its
 * threshold, a remainder above the lowest one of the parent. The readers in C++ and Python compute the same.
 * @throws TableError for a model, an option or a vertex this version does not know, or a hadron or grid that is missing
 */
export function rowsEvaluator(parent: v1.Parent.$Properties, hadrons: HadronsByName): RowsEvaluator {
  const all = parent.rows ?? [];
  const lowestMeV = Math.min(...all.filter((row) => row.daughters?.length).map(lowestMassMeV));
  const rows = all.map((row) => rowWidth(parent, row, hadrons, lowestMeV));
  return {
    rowCount: rows.length,
    manyInto(massesMeV, widths, totals) {
      const count = massesMeV.length;
      let largestMeV = 0;
      for (let k = 0; k < count; k++) {
        requirePositive("mass of the parent", massesMeV[k]!, "Give the mass in MeV.");
        largestMeV = Math.max(largestMeV, massesMeV[k]!);
      }
      widths.fill(0, 0, count * rows.length);
      totals.fill(0, 0, count);
      for (let row = 0; row < rows.length; row++) {
        const law = rows[row]!;
        const { thresholdMeV } = law;
        if (!(largestMeV > thresholdMeV)) continue;
        for (let k = 0, at = row; k < count; k++, at += rows.length) {
          const massMeV = massesMeV[k]!;
          if (!(massMeV > thresholdMeV)) continue;
          const width = law.widthMeV(massMeV);
          widths[at] = width;
          totals[k]! += width;
        }
      }
      for (let k = 0; k < count; k++) requireFinite(totals[k]!, massesMeV[k]!);
    },
    widthsInto(massMeV, widths, offset) {
      requirePositive("mass of the parent", massMeV, "Give the mass in MeV.");
      let total = 0;
      for (let k = 0; k < rows.length; k++) {
        const law = rows[k]!;
        const width = massMeV > law.thresholdMeV ? law.widthMeV(massMeV) : 0;
        widths[offset + k] = width;
        total += width;
      }
      requireFinite(total, massMeV);
      return total;
    },
  };
}

function requireFinite(total: number, massMeV: number): void {
  if (!Number.isFinite(total)) refuse("mass of the parent", "one at which widths are finite", massMeV);
}

/** Fractions of all rows at a mass; they add up to 1, or are all 0 where every row is closed. */
export function fractionsAt(evaluator: RowsEvaluator, massMeV: number): number[] {
  const widths = new Array<number>(evaluator.rowCount).fill(0);
  const total = evaluator.widthsInto(massMeV, widths, 0);
  return total > 0 ? widths.map((width) => width / total) : widths;
}

function rowWidth(
  parent: v1.Parent.$Properties,
  row: v1.Row.$Properties,
  hadrons: HadronsByName,
  lowestMeV: number,
): RowWidth {
  if (takesGrid(row)) return gridOf(row);
  const waves = row.waves ?? [];
  const nominalMeV = parent.hadron?.mass ?? Number.NaN;
  if (waves.length === 0 && row.power != null) return powerOfDistance(row, row.power, nominalMeV);
  if (waves.length === 0) return constantWidth(row, lowestMeV, nominalMeV);
  const [first, second, more] = (row.daughters ?? []).map((daughter) => daughterOf(row, daughter, hadrons));
  if (first === undefined || second === undefined || more !== undefined || !(nominalMeV > 0)) {
    throw new TableError(
      `${row.id}: expected two daughters and a parent's mass > 0 of a row with waves, got others`,
    );
  }
  const spins = [parent.hadron!, first, second];
  const [firstMeV, secondMeV] = [first.mass!, second.mass!];
  const momentumMeV = breakupMomentumMeV(nominalMeV, firstMeV, secondMeV);
  const nominal = { parentMeV: nominalMeV, firstMeV, secondMeV, momentumMeV };
  const ready = waves.map((wave) => {
    const factor = factorOf(row, wave, spins);
    return { wave, factor, atNominal: momentumMeV > 0 ? factor(nominal) : 0 };
  });
  if (ready.some(({ wave, atNominal }) => atNominal === 0 && waveWidth(wave) > 0)) return gridOf(row);
  const scaled = ready.map(({ wave, factor, atNominal }) => ({
    factor,
    scale: scaleOf(row, wave, atNominal),
  }));
  return new ClosedForm(scaled, firstMeV, secondMeV);
}

/** True for a row whose width has no closed form. */
function takesGrid(row: v1.Row.$Properties): boolean {
  return row.grid != null && (row.flags ?? []).includes(v1.Flag.FLAG_FOLDED);
}

/** Mass of the parent where a row with daughters opens. */
function lowestMassMeV(row: v1.Row.$Properties): number {
  return (takesGrid(row) ? row.grid!.threshold : row.threshold) ?? Number.NaN;
}

function gridOf(row: v1.Row.$Properties): RowWidth {
  if (row.grid == null) {
    refuseWave(row, "a grid, since the nominal masses forbid the decay", "a width without one");
  }
  const { threshold, distances, logWidths, slopes } = row.grid;
  const grid = {
    thresholdMeV: threshold ?? Number.NaN,
    distancesMeV: distances ?? [],
    logWidths: logWidths ?? [],
    slopes: slopes ?? [],
  };
  const x = grid.distancesMeV;
  const sizes = x.length >= 2 && grid.logWidths.length === x.length && grid.slopes.length === x.length;
  const ascending = x.every((distance, k) => distance > (k === 0 ? 0 : x[k - 1]!));
  if (sizes && ascending && Number.isFinite(threshold)) return new Tabulated(grid);
  throw new TableError(`${row.id}: expected a grid of two points or more in ascending order, got another`);
}

function constantWidth(row: v1.Row.$Properties, lowestMeV: number, nominalMeV: number): RowWidth {
  const width = row.width?.value ?? Number.NaN;
  const own = row.threshold ?? Number.NaN;
  if (!Number.isFinite(width) || !Number.isFinite(own)) {
    throw new TableError(`${row.id}: expected a row without waves to have a width and a threshold, got none`);
  }
  // A remainder of a parent below its lowest threshold is all there is of its width.
  const takesLowest = (row.daughters ?? []).length === 0 && lowestMeV < nominalMeV;
  const threshold = takesLowest ? lowestMeV : own;
  return new PowerOfDistance(threshold, width, 1, 0);
}

/** A daughter's hadron; TableError where the table lacks it or its mass. */
export function daughterOf(
  row: v1.Row.$Properties,
  { name }: v1.Daughter.$Properties,
  hadrons: HadronsByName,
): v1.Hadron.$Properties {
  const hadron = hadrons.get(name ?? "");
  if (hadron?.mass != null && hadron.mass >= 0 && Number.isFinite(hadron.mass)) return hadron;
  throw new TableError(`${row.id}: expected ${name} among the hadrons of the table with its mass, got none`);
}

/** The law of a row outside the symmetry, width ((m - threshold)/(m0 - threshold))^power. */
function powerOfDistance(row: v1.Row.$Properties, power: number, nominalMeV: number): RowWidth {
  const [width, threshold] = [row.width?.value ?? Number.NaN, row.threshold ?? Number.NaN];
  const distance = nominalMeV - threshold;
  if (!(Number.isFinite(width) && width >= 0 && distance > 0 && power >= 0)) {
    throw new TableError(
      `${row.id}: expected a width, a threshold below the parent's mass and a power >= 0, got others`,
    );
  }
  return new PowerOfDistance(threshold, width, distance, power);
}

/** Part of a row's width at the nominal mass that a wave has, in MeV. */
function waveWidth({ re, im }: v1.Wave.$Properties): number {
  return (re ?? Number.NaN) ** 2 + (im ?? Number.NaN) ** 2;
}

/** What K is multiplied with to give the width in MeV. */
function scaleOf(row: v1.Row.$Properties, wave: v1.Wave.$Properties, atNominal: number): number {
  const amplitude = wave.flavourAmplitude ?? Number.NaN;
  const scale =
    atNominal > 0 ? waveWidth(wave) / atNominal : (row.identicalFactor ?? Number.NaN) * amplitude ** 2;
  if (Number.isFinite(scale) && Number.isFinite(atNominal)) return scale;
  throw new TableError(`${row.id}: expected finite amplitudes, got others`);
}

/** K of a wave, with model, options and vertex checked here and not at every mass. */
export function factorOf(
  row: v1.Row.$Properties,
  wave: v1.Wave.$Properties,
  spins: readonly v1.Hadron.$Properties[],
): Factor {
  const definition = widthModelDefinitions().find(({ id }) => id === wave.model);
  if (definition === undefined) {
    const known = widthModelDefinitions().map(({ id }) => id);
    refuseWave(row, `a width model among ${known.join(", ")}`, JSON.stringify(wave.model));
  }
  const options = optionValues(row.id ?? "", definition, wave.options ?? []);
  const vertex = vertexOf(wave, spins);
  try {
    return widthModel(definition.id, options).factorMeV(vertex);
  } catch (cause) {
    if (cause instanceof InputError) throw new TableError(`${row.id}: ${cause.message}`, { cause });
    throw cause;
  }
}

function vertexOf(
  wave: v1.Wave.$Properties,
  [parent, first, second]: readonly v1.Hadron.$Properties[],
): Vertex {
  const spinParity = (hadron: v1.Hadron.$Properties | undefined) =>
    hadron?.twoJ == null
      ? undefined
      : { twoJ: hadron.twoJ, parity: hadron.parity === -1 ? (-1 as const) : (1 as const) };
  const [of, a, b] = [spinParity(parent), spinParity(first), spinParity(second)];
  const L = (wave.twoL ?? Number.NaN) / 2;
  return of === undefined || a === undefined || b === undefined
    ? { L }
    : { L, parent: of, daughters: [a, b] };
}

function refuseWave(row: v1.Row.$Properties, expected: string, got: string): never {
  throw new TableError(
    `${row.id}: expected ${expected}, got ${got}. Read the table with a newer version of Couplet.`,
  );
}
