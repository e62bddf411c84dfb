import type { DaughterShapes } from "../model/daughter-shapes.js";
import type { WaveKinematics } from "../model/kinematics.js";
import type { Channel, Observable, Parent } from "../model/model.js";
import { widthModel } from "../widths/width-model.js";
import { partsPerBillion } from "./parts-per-billion.js";
import type { Predictions } from "./predictions.js";
import { runningRows } from "./running-rows.js";
import type { Comparison, Flag, ParentTable, Row, RowWave } from "./tables.js";
import type { Completed, Entry } from "./total-width.js";

/** Below this momentum, in MeV, phase space rules the width; common practice, as is one width above threshold. */
const NEAR_THRESHOLD_MOMENTUM_MEV = 100;

/** Below this part of the coupling strength, breaking may dominate an amplitude. */
const SMALL_AMPLITUDE = 0.2;

/** The decay table of one parent: a row for each channel, the remainder last, and the line shape they give. */
export function parentTable(
  predictions: Predictions,
  parent: Parent,
  entries: readonly Entry[],
  completed: Completed,
  shapes: DaughterShapes,
): ParentTable {
  const { model } = predictions.fit;
  const fractions = completed.estimates.map(({ fraction }) => fraction.value);
  const remainder = completed.remainder;
  const all = remainder === undefined ? fractions : [...fractions, remainder.fraction.value];
  const parts = partsPerBillion(all, residueRow(entries, fractions, remainder !== undefined));
  const waves = parent.channels.map((index, k) =>
    wavesOf(predictions, index, completed.estimates[k]!.widthMeV.value),
  );
  const running = runningRows(
    parent.hadron.massMeV,
    completed.totalMeV,
    parent.channels.map((index, k) => ({
      channel: model.channels[index]!,
      strengths: strengthsOf(model.channels[index]!, waves[k]!),
    })),
    remainder?.widthMeV.value ?? 0,
    shapes,
  );
  const integrated = (k: number) =>
    running === undefined ? {} : { integratedFraction: running.integratedFractions[k]! };
  const rows = parent.channels.map((index, k): Row => {
    const channel = model.channels[index]!;
    const { fraction, widthMeV } = completed.estimates[k]!;
    const entry = entries[k]!;
    const grid = running?.grids[k];
    return {
      id: channel.id,
      daughters: channel.daughters,
      partsPerBillion: parts[k]!,
      fraction,
      ...integrated(k),
      widthMeV,
      flags: flagsOf(channel, entry, predictions.channels[index]!.relativeStrength),
      ...provenanceOf(predictions, completed, entry),
      kinematics: kinematicsOf(channel),
      thresholdMeV: channel.thresholdMeV,
      momentumMeV: channel.momentumMeV,
      identicalFactor: channel.identicalFactor,
      waves: waves[k]!,
      ...(grid === undefined ? {} : { grid }),
      isospin: { channel: channel.isospinChannel, coefficient: channel.isospinCoefficient },
    };
  });
  if (remainder !== undefined) {
    rows.push({ ...remainderRow(parent, parts.at(-1)!, remainder), ...integrated(rows.length) });
  }
  return {
    parent,
    totalWidthMeV: completed.totalMeV,
    totalWidthErrorMeV: completed.totalErrorMeV,
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
    warnings: warningsOf(parent, completed),
  };
}

/** Origin, source and comparison of a row. */
function provenanceOf(
  predictions: Predictions,
  completed: Completed,
  entry: Entry,
): Pick<Row, "origin" | "sources" | "measurement"> {
  if (entry.kind === "predicted") return { origin: "predicted", sources: [] };
  const observable = completed.observables[entry.observable]!;
  return {
    origin: "measured",
    sources: [observable.source],
    measurement: { ...comparisonOf(predictions, observable), share: entry.share },
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

/** Where the residue of rounding goes: the remainder, else the largest predicted row, else the largest row. */
function residueRow(entries: readonly Entry[], fractions: readonly number[], hasRemainder: boolean): number {
  if (hasRemainder) return fractions.length;
  const largest = (wanted: (entry: Entry) => boolean) =>
    fractions.reduce(
      (best, f, k) => (wanted(entries[k]!) && (best < 0 || f > fractions[best]!) ? k : best),
      -1,
    );
  const predicted = largest((entry) => entry.kind === "predicted");
  return predicted >= 0 && fractions[predicted]! > 0 ? predicted : largest(() => true);
}

function comparisonOf(predictions: Predictions, observable: Observable): Omit<Comparison, "share"> {
  const { value, plus, minus, unit } = observable.measured;
  const pull = predictions.minimum.pulls.find((candidate) => candidate.observable === observable);
  return {
    quantity: observable.label,
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
  const { amplitudes } = channels[index]!;
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

function remainderRow(
  parent: Parent,
  parts: number,
  { fraction, widthMeV }: NonNullable<Completed["remainder"]>,
): Row {
  return {
    id: `${parent.hadron.name} -> (remainder)`,
    daughters: [],
    partsPerBillion: parts,
    fraction,
    widthMeV,
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
  if (remainder === undefined || remainder.fraction.value <= 0.5) return [];
  const percent = (100 * remainder.fraction.value).toFixed(1);
  return [
    `${parent.hadron.name}: ${percent} % of the width has no channel in this study; do not rely on the fractions as a set.`,
  ];
}
