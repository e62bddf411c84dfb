import type { DaughterShapes } from "../model/daughter-shapes.js";
import { isFolded, twoBodyChannel } from "../model/kinematics.js";
import type { Channel } from "../model/model.js";
import { type DrawGrid, drawGrid, drawMass } from "../widths/draw-mass.js";
import { channelThresholdMeV, foldedWidth } from "../widths/folded-width.js";
import { gridWidth, type MassGrid, massGrid } from "../widths/mass-grid.js";
import { channelFractions, parentLineShape } from "../widths/parent-line-shape.js";
import { powerWidth, type RunningWidth, totalWidth } from "../widths/running-width.js";

/** A narrow part of a line shape: the chance of its masses, and the fraction of each row in its middle. */
export interface Slice {
  readonly chance: number;
  readonly fractions: readonly number[];
}

/** A parent's line shape and what follows from it for its rows. */
export interface RunningRows {
  readonly windowMeV: readonly [number, number];
  /** N, by which the density of the mass is divided. */
  readonly normalisation: number;
  readonly draw: DrawGrid;
  /** Fraction of each row integrated over the line shape, the remainder's last where there is one; they add up to 1. */
  readonly integratedFractions: readonly number[];
  /** The line shape in slices, with the fractions in the order of `integratedFractions`. */
  readonly slices: readonly Slice[];
  /** Partial width of each row against mass; undefined for rows without one. */
  readonly grids: readonly (MassGrid | undefined)[];
}

/**
 * A row as far as its running goes: its channel, and the strength of each wave, s |A|^2, that gives its width; or its width
 * at the nominal mass and the power of the distance from threshold with which it grows.
 */
export type RunningRow =
  | { readonly channel: Channel; readonly strengths: readonly number[] }
  | { readonly widthMeV: number; readonly thresholdMeV: number; readonly power: number };

/** A parent narrower than this part of its distance from threshold, or than a keV, has its nominal mass. */
const NARROW = 1e-4;
const NARROW_MEV = 1e-3;

/** Upper end of the mass window, in nominal widths above the mass; see `parentLineShape`. */
const WINDOW_WIDTHS = 3;

/**
 * The line shape of a parent from its rows: every row runs as its width model says (unstable daughters folded), a
 * remainder stays constant above the lowest threshold.
 *
 * @param totalMeV - total width at the nominal mass; rows and remainder add up to it
 * @returns undefined for a parent that is narrow, or has no open row
 */
export function runningRows(
  massMeV: number,
  totalMeV: number,
  rows: readonly RunningRow[],
  remainderMeV: number,
  shapes: DaughterShapes,
): RunningRows | undefined {
  if (!(totalMeV > NARROW_MEV)) return undefined;
  // Grids follow their widths to 1e-4, and the window is made from their sum: a little more than the window.
  const topMeV = massMeV + WINDOW_WIDTHS * totalMeV * 1.001;
  const widths = rows.map((row) => rowWidth(row, massMeV, topMeV, shapes));
  const open = widths.flatMap((width) =>
    width === undefined || width.running.widthMeV(massMeV) === 0 ? [] : [width.running],
  );
  if (open.length === 0) return undefined;
  const thresholdMeV = Math.min(...widths.flatMap((width) => width?.running.thresholdsMeV ?? []));
  if (totalMeV < NARROW * (massMeV - thresholdMeV)) return undefined;
  const remainder = remainderMeV > 0 ? [powerWidth(remainderMeV, massMeV, thresholdMeV, 0)] : [];
  const present = widths.filter((width) => width !== undefined);
  const line = parentLineShape(massMeV, [...present.map(({ running }) => running), ...remainder], {
    windowWidths: WINDOW_WIDTHS,
    relativeError: 1e-8,
  });
  let next = 0;
  const places = widths.map((width) => (width === undefined ? undefined : next++));
  if (remainder.length > 0) places.push(next);
  const byRow = (fractions: readonly number[]) =>
    places.map((place) => (place === undefined ? 0 : fractions[place]!));
  const draw = drawGrid(line.shape);
  return {
    windowMeV: line.shape.windowMeV,
    normalisation: line.shape.normalisation,
    draw,
    integratedFractions: byRow(line.integratedFractions),
    slices: slicesOf(draw, (massMeV) => byRow(channelFractions(line.channels, massMeV))),
    grids: widths.map((width) => width?.grid),
  };
}

/** A line shape cut where its grid to draw from has points. */
function slicesOf(draw: DrawGrid, fractionsAt: (massMeV: number) => number[]): Slice[] {
  return draw.cumulative.map((end, k) => {
    const start = k === 0 ? 0 : draw.cumulative[k - 1]!;
    return { chance: end - start, fractions: fractionsAt(drawMass(draw, (start + end) / 2)) };
  });
}

/** A row's width against mass and its grid; undefined where it vanishes or opens above the window. */
function rowWidth(
  row: RunningRow,
  massMeV: number,
  topMeV: number,
  shapes: DaughterShapes,
): { running: RunningWidth; grid: MassGrid } | undefined {
  if ("power" in row) {
    if (row.widthMeV === 0) return undefined;
    const running = powerWidth(row.widthMeV, massMeV, row.thresholdMeV, row.power);
    return { running, grid: massGrid(running, topMeV) };
  }
  const { channel, strengths } = row;
  const waves = channel.waves.flatMap((wave, w) =>
    strengths[w]! > 0 ? [{ channel: twoBodyChannel(wave.kinematics, shapes), strength: strengths[w]! }] : [],
  );
  if (waves.length === 0 || channelThresholdMeV(waves[0]!.channel) >= topMeV - 1) return undefined;
  const parts = waves.map(({ channel: two, strength }) =>
    foldedWidth(two, strength, { relativeError: 1e-8 }),
  );
  // One channel has one threshold, whatever its waves.
  const running = { ...totalWidth(parts), thresholdsMeV: [parts[0]!.thresholdsMeV[0]!] };
  const grid = massGrid(running, topMeV);
  // A folded width is an integral at every mass; its grid serves instead.
  return { running: waves.some(({ channel: two }) => isFolded(two)) ? gridWidth(grid) : running, grid };
}
