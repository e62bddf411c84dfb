import type { DaughterShapes } from "../model/daughter-shapes.js";
import type { WaveKinematics } from "../model/kinematics.js";
import type { Channel, Mode, Parent, TableValue } from "../model/model.js";
import { widthModel } from "../widths/width-model.js";
import { constrainedWarning } from "./constrained-warning.js";
import { integratedEstimates, type OtherAnswer } from "./integrated-fractions.js";
import { leftovers, measuredModes, modeFlags, modeRow, modeRunning } from "./mode-rows.js";
import { partsPerBillion } from "./parts-per-billion.js";
import type { Predictions } from "./predictions.js";
import { runningRows } from "./running-rows.js";
import type { Comparison, Flag, ParentTable, Row, RowWave } from "./tables.js";
import type { Completed, CompletedRow, Entry } from "./total-width.js";

/** Below this momentum, in MeV, phase space rules the width; common practice, as is one width above threshold. */
const NEAR_THRESHOLD_MOMENTUM_MEV = 100;

/** Below this part of the coupling strength, breaking may dominate an amplitude. */
const SMALL_AMPLITUDE = 0.2;

/**
 * The decay table of one parent: a row for each channel, the remainder last, and the line shape they give.
 *
 * @param others - other answers, of which fractions over the line shape have errors
 */
export function parentTable(
  predictions: Predictions,
  parent: Parent,
  entries: readonly Entry[],
  completed: Completed,
  shapes: DaughterShapes,
  others: readonly OtherAnswer[],
): ParentTable {
  const { model } = predictions.fit;
  const { estimates } = completed;
  const modes = measuredModes(parent);
  const left = leftovers(parent, completed.remainder);
  const nominal = [...estimates, ...left].map(({ fraction }) => fraction);
  const fractions = nominal.map(({ value }) => value);
  const parts = partsPerBillion(fractions, residueRow(entries, fractions));
  const waves = parent.channels.map((index, k) => wavesOf(predictions, index, estimates[k]!.widthMeV.value));
  const ofMode = (k: number) => estimates[parent.channels.length + k]!;
  const named = left.flatMap(({ mode, widthMeV }) => (mode === undefined ? [] : [{ mode, widthMeV }]));
  const running = runningRows(
    parent.hadron.massMeV,
    completed.totalMeV,
    [
      ...parent.channels.map((index, k) => ({
        channel: model.channels[index]!,
        strengths: strengthsOf(model.channels[index]!, waves[k]!),
      })),
      ...modes.map((mode, k) => modeRunning(mode, ofMode(k).widthMeV.value)),
      ...named.map(({ mode, widthMeV }) => modeRunning(mode, widthMeV.value)),
    ],
    left.find(({ mode }) => mode === undefined)?.widthMeV.value ?? 0,
    shapes,
  );
  const integrated =
    running === undefined
      ? undefined
      : integratedEstimates(nominal, running.integratedFractions, running.slices, completed.changes, others);
  /** What the place of a row among all rows decides. */
  const placed = (k: number): Pick<Row, "partsPerBillion" | "integrated" | "grid"> => {
    const grid = running?.grids[k];
    return {
      partsPerBillion: parts[k]!,
      ...(integrated === undefined ? {} : { integrated: integrated[k]! }),
      ...(grid === undefined ? {} : { grid }),
    };
  };
  const settled = (k: number): CompletedRow & Pick<Row, "origin" | "sources" | "measurement"> => ({
    ...estimates[k]!,
    ...provenanceOf(predictions, completed, entries[k]!),
  });
  const moved = (k: number): Flag[] => (estimates[k]!.unadjusted === undefined ? [] : ["adjusted"]);
  const rows = parent.channels.map((index, k): Row => {
    const channel = model.channels[index]!;
    const flags = flagsOf(channel, entries[k]!, predictions.channels[index]!.relativeStrength);
    return {
      id: channel.id,
      daughters: channel.daughters,
      ...placed(k),
      ...settled(k),
      flags: [...flags, ...moved(k)],
      kinematics: kinematicsOf(channel),
      thresholdMeV: channel.thresholdMeV,
      momentumMeV: channel.momentumMeV,
      identicalFactor: channel.identicalFactor,
      waves: waves[k]!,
      isospin: { channel: channel.isospinChannel, coefficient: channel.isospinCoefficient },
    };
  });
  for (const mode of modes) {
    const k = rows.length;
    rows.push({
      ...modeRow(parent, mode),
      ...placed(k),
      ...settled(k),
      flags: [...modeFlags(mode), ...moved(k)],
    });
  }
  for (const { mode, fraction, widthMeV } of left) {
    const k = rows.length;
    rows.push({ ...leftoverRow(parent, mode), ...placed(k), fraction, widthMeV });
  }
  return {
    parent,
    totalWidthMeV: completed.totalMeV,
    totalWidthErrorsMeV: completed.totalErrorsMeV,
    rows,
    ...(running === undefined
      ? {}
      : {
          lineShape: {
            windowMeV: running.windowMeV,
            normalisation: running.normalisation,
            draw: running.draw,
          },
        }),
    warnings: [...warningsOf(parent, completed), ...constrainedWarning(parent, entries, completed)],
  };
}

/** Origin, source and comparison of a row. */
function provenanceOf(
  predictions: Predictions,
  completed: Completed,
  entry: Entry,
): Pick<Row, "origin" | "sources" | "measurement"> {
  if (entry.kind === "predicted") return { origin: "predicted", sources: [] };
  const value = completed.values[entry.observable]!;
  return {
    origin: "measured",
    sources: [value.source],
    measurement: { ...comparisonOf(predictions, value), share: entry.share },
  };
}

/** Open at nominal masses, open only through the width of a daughter, or closed. */
function kinematicsOf({ momentumMeV, waves }: Channel): Row["kinematics"] {
  if (momentumMeV > 0) return "open";
  return waves.some(({ kinematicFactor }) => kinematicFactor > 0) ? "folded" : "closed";
}

/** s |A|^2 of each wave such that the row's width comes out at the nominal mass; the fit's where the row is closed. */
function strengthsOf(channel: Channel, waves: readonly RowWave[]): number[] {
  return channel.waves.map(({ kinematicFactor }, w) => {
    const { re, im, flavourAmplitude } = waves[w]!;
    return kinematicFactor > 0
      ? (re * re + im * im) / kinematicFactor
      : channel.identicalFactor * flavourAmplitude ** 2;
  });
}

/** Where the residue of rounding goes: the largest of the remainder, else the largest predicted row, else the largest. */
function residueRow(entries: readonly Entry[], fractions: readonly number[]): number {
  const largest = (wanted: (k: number) => boolean) =>
    fractions.reduce((best, f, k) => (wanted(k) && (best < 0 || f > fractions[best]!) ? k : best), -1);
  const left = largest((k) => k >= entries.length);
  if (left >= 0) return left;
  const predicted = largest((k) => entries[k]!.kind === "predicted");
  return predicted >= 0 && fractions[predicted]! > 0 ? predicted : largest(() => true);
}

function comparisonOf(predictions: Predictions, settling: TableValue): Omit<Comparison, "share"> {
  const { value, plus, minus, unit } = settling.measured;
  const pull = predictions.minimum.pulls.find(({ observable }) => observable === settling);
  return {
    quantity: settling.label,
    value,
    plus,
    minus,
    unit,
    ...(pull === undefined ? {} : { fitted: pull.fitted, pull: pull.pull }),
  };
}

function flagsOf(channel: Channel, entry: Entry, relativeStrength: number): Flag[] {
  const flags: Flag[] = [];
  if (entry.kind !== "predicted" && entry.split) flags.push("isospin-split");
  const distance = Math.abs(channel.parent.massMeV - channel.thresholdMeV);
  const slow = channel.momentumMeV > 0 && channel.momentumMeV < NEAR_THRESHOLD_MOMENTUM_MEV;
  if (slow || distance < (channel.parent.widthMeV ?? 0)) flags.push("near-threshold");
  if (channel.waves.some(({ folded }) => folded)) flags.push("folded");
  if (relativeStrength < SMALL_AMPLITUDE) flags.push("small-amplitude");
  return flags;
}

/** Amplitudes whose squares add up to the row's width: the fit's at nominal masses, scaled to it. */
function wavesOf({ fit, evaluation, channels }: Predictions, index: number, rowWidthMeV: number): RowWave[] {
  const channel = fit.model.channels[index]!;
  const { amplitudes, phasesKnown } = channels[index]!;
  const fitted = channel.waves.map(
    ({ kinematicFactor }, w) => amplitudes[w]! * Math.sqrt(channel.identicalFactor * kinematicFactor),
  );
  const length = Math.hypot(...fitted);
  return channel.waves.map(({ L, twoS, model, kinematics }, w): RowWave => {
    const part = length > 0 ? fitted[w]! / length : Math.sqrt(1 / channel.waves.length);
    return {
      L,
      twoS,
      re: part * Math.sqrt(rowWidthMeV),
      im: 0,
      phase: phasesKnown ? "known" : "assumed",
      model,
      flavourAmplitude: amplitudes[w]!,
      unit: amplitudeUnit(kinematics),
      kinematicFactor: evaluation.kinematicFactor(index, w),
    };
  });
}

function amplitudeUnit({ L, model, spins }: WaveKinematics): string {
  const [parent, ...daughters] = spins;
  return widthModel(model.id, model.options).amplitudeUnit({ L, parent, daughters });
}

/** A row of what is left of the total width, with the daughters that the study names for it or without. */
function leftoverRow(
  parent: Parent,
  mode: Mode | undefined,
): Omit<Row, "partsPerBillion" | "fraction" | "widthMeV"> {
  if (mode !== undefined) {
    const sources = mode.origin.kind === "remainder" ? [mode.origin.source] : [];
    return { ...modeRow(parent, mode), origin: "remainder", flags: modeFlags(mode), sources };
  }
  return {
    id: `${parent.hadron.name} -> (remainder)`,
    daughters: [],
    origin: "remainder",
    flags: ["undecayable"],
    sources: [],
    kinematics: "open",
    thresholdMeV: 0,
    momentumMeV: 0,
    identicalFactor: 1,
    waves: [],
  };
}

function warningsOf(parent: Parent, { remainder }: Completed): string[] {
  const isNamed = parent.modes.some(({ origin }) => origin.kind === "remainder");
  if (remainder === undefined && isNamed)
    return [
      `${parent.hadron.name}: the other rows leave nothing of the total width to the modes that take the remainder; these have no rows.`,
    ];
  if (remainder === undefined || isNamed || remainder.fraction.value <= 0.5) return [];
  const percent = (100 * remainder.fraction.value).toFixed(1);
  return [
    `${parent.hadron.name}: ${percent} % of the width has no channel in this study; do not rely on the fractions as a set.`,
  ];
}
