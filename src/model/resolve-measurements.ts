import { upperLimitSigma } from "../fit/measurement-errors.js";
import type { Quantity, Study, StudyMeasurement } from "../study/study.js";
import { axialRow } from "./axial.js";
import type { Decay, Observable, Parameter, Parent, Quantum, Total, WidthSum } from "./model.js";
import type { Problems } from "./problems.js";
import { noteRepeated } from "./repeated-measurements.js";
import { hadronsNamed, type Known, widthSumOf } from "./width-sums.js";

/** A phase this near to 90 degrees, in radians, has no sign. */
const PHASE_ROUNDING = 1e-9;

/** What measurements are resolved against. */
export interface Context extends Known {
  readonly study: Study;
  readonly decays: readonly Decay[];
  /** Parameters so far; total widths and normalisations are appended. */
  readonly parameters: Parameter[];
}

/** Ties every measurement to the channels it is about; what cannot be tied is noted. */
export function resolveMeasurements(context: Context, problems: Problems): Observable[] {
  const written = context.study.measurements.flatMap((measurement) => {
    const observable = resolveMeasurement(measurement, context, problems);
    return observable === undefined ? [] : [{ path: measurement.path, observable }];
  });
  noteRepeated(written, problems);
  return written.map(({ observable }) => observable);
}

function resolveMeasurement(
  measurement: StudyMeasurement,
  context: Context,
  problems: Problems,
): Observable | undefined {
  const { path, signOnly, source, use } = measurement;
  if (!requireError(measurement, problems)) return undefined;
  const quantum = quantumOf(measurement, path, context, problems);
  if (quantum === undefined) return undefined;
  // The amplitude of an elastic reaction is a square: the phase of its residue is that of the background.
  const phase =
    quantum.kind === "residue" && isElastic(quantum.pair, context) ? undefined : measurement.phase;
  if (!requireSignOfPhase(phase, path, problems)) return undefined;
  const measured = withPhase(withLimit(measurement.value), phase);
  const common = { measured, signOnly, source, use, position: problems.positionOf(path) };
  const observable = {
    ...common,
    label: measurementLabel(measurement),
    quantum,
  };
  const normalisation = normalisationOf(measurement, path, context, problems);
  return normalisation === undefined ? observable : { ...observable, normalisation };
}

/** What a measurement is of, as every table prints it, e.g. `width N(1675) -> N pi`. */
export function measurementLabel({ kind, channels }: StudyMeasurement): string {
  return `${kind} ${channels.join(kind === "ratio" ? " / " : ", ")}`;
}

/** A value that enters the fit needs an error; notes where it has none. */
export function requireError({ path, value, signOnly, use }: StudyMeasurement, problems: Problems): boolean {
  if (use === "table" || signOnly || value.plus > 0) return true;
  problems.add(
    `${path}/value`,
    "expected an error, since the value enters the fit. Write `value +- error`, or give it `use: table`.",
  );
  return false;
}

/** An upper limit as a half-Gaussian at 0. */
function withLimit(quantity: Quantity): Quantity {
  if (quantity.limit === undefined) return quantity;
  const sigma = upperLimitSigma(quantity.plus, quantity.limit.confidence);
  return { ...quantity, plus: sigma, minus: sigma };
}

function quantumOf(
  measurement: StudyMeasurement,
  path: string,
  context: Context,
  problems: Problems,
): Quantum | undefined {
  const { kind, channels, value, use } = measurement;
  const fitted = use !== "table";
  if (kind === "axial") {
    const row = problems.attempt(`${path}/axial`, () => axialRow(channels[0]!, context.decays));
    return row && { kind, row: padded(row, context.parameters.length) };
  }
  if (kind === "total") {
    const of = totalSum(channels[0]!, `${path}/total`, context, problems);
    return of && { kind, of };
  }
  const paths = channels.length === 2 ? [`${path}/${kind}/0`, `${path}/${kind}/1`] : [`${path}/${kind}`];
  const [of, other] = channels.map((text, k) => widthSumOf(text, paths[k]!, context, problems));
  if (of === undefined) return undefined;
  const sums = other === undefined ? [of] : [of, other];
  if (!sums.every((sum, k) => value.value === 0 || requireOpen(sum, paths[k]!, context, problems)))
    return undefined;
  if (kind === "width") return { kind, of };
  if (kind === "fraction") return { kind, of, total: totalWidthOf(of, fitted, context) };
  if (other === undefined) return undefined;
  if (kind === "ratio") return { kind, of, over: other };
  if (!sameParents(of, other, context)) {
    problems.add(
      `${path}/${kind}`,
      `expected two channels of the same parent, got ${JSON.stringify(channels)}.`,
    );
    return undefined;
  }
  const total = totalWidthOf(of, fitted, context);
  if (kind === "product") return { kind, of, by: other, total };
  const pair = [of, other] as const;
  for (const [k, sum] of pair.entries()) if (!oneWave(sum, paths[k]!, context, problems)) return undefined;
  if (kind === "residue" && measurement.phase === undefined) return { kind, pair };
  const signs = signOf(measurement, pair, context);
  return kind === "residue" ? { kind, pair, ...signs } : { kind, pair, total, ...signs };
}

/** The sign of a reaction: given, or fitted; that of elastic scattering is +. */
function signOf(
  { sign }: StudyMeasurement,
  pair: readonly [WidthSum, WidthSum],
  context: Context,
): { sign: 1 | -1; reaction?: string } {
  if (sign !== "free") return { sign };
  return isElastic(pair, context) ? { sign: 1 } : { sign: 1, reaction: reactionOf(pair, context) };
}

/** Whether a reaction ends as it began, wave included. */
function isElastic(pair: readonly [WidthSum, WidthSum], { channels }: Known): boolean {
  const [entrance, exit] = pair.map(([first]) => ({
    isospinChannel: channels[first!.channel]!.isospinChannel,
    wave: first!.waves?.[0] ?? 0,
  }));
  return entrance!.isospinChannel === exit!.isospinChannel && entrance!.wave === exit!.wave;
}

/** A residue's modulus with the sign of its phase: couplings are real here, so + up to 90 degrees and - beyond. */
function withPhase(quantity: Quantity, phase: Quantity | undefined): Quantity {
  if (phase === undefined || Math.cos(phase.value) > 0) return quantity;
  return { ...quantity, value: -quantity.value, plus: quantity.minus, minus: quantity.plus };
}

/** A phase must tell the sign; notes where it is as near to +-90 degrees as its error. */
function requireSignOfPhase(phase: Quantity | undefined, path: string, problems: Problems): boolean {
  if (phase === undefined) return true;
  const distance = Math.abs(Math.asin(Math.cos(phase.value)));
  if (distance > Math.max(phase.plus, phase.minus, PHASE_ROUNDING)) return true;
  const degrees = (phase.value * 180) / Math.PI;
  problems.add(
    `${path}/phase`,
    `expected a phase farther from 90 and -90 deg than its error, since it gives the residue's sign, got ${degrees.toFixed(1)} deg. Leave the phase out: then the modulus alone counts.`,
  );
  return false;
}

/** A measured value other than 0 needs a channel that is open; notes at `path` one that is closed in every charge state. */
function requireOpen(sum: WidthSum, path: string, { channels }: Known, problems: Problems): boolean {
  const named = sum.map(({ channel }) => channels[channel]!);
  if (named.some(({ waves }) => waves.some(({ kinematicFactor }) => kinematicFactor > 0))) return true;
  const { id, thresholdMeV, parent } = named.reduce((a, b) =>
    a.parent.massMeV - a.thresholdMeV > b.parent.massMeV - b.thresholdMeV ? a : b,
  );
  problems.add(
    path,
    `expected a channel that is open, got ${id} with its threshold at ${thresholdMeV.toFixed(1)} MeV above the parent's ${parent.massMeV} MeV. Check the masses, or take the measurement out.`,
  );
  return false;
}

function padded(row: readonly number[], length: number): number[] {
  return Array.from({ length }, (_, k) => row[k] ?? 0);
}

function parentNames(sum: WidthSum, { channels }: Known): string[] {
  return [...new Set(sum.map(({ channel }) => channels[channel]!.parent.name))];
}

function sameParents(a: WidthSum, b: WidthSum, known: Known): boolean {
  return parentNames(a, known).join() === parentNames(b, known).join();
}

/** A signed amplitude is of one isospin channel and one wave. */
function oneWave(sum: WidthSum, path: string, { channels }: Known, problems: Problems): boolean {
  const isospin = new Set(sum.map(({ channel }) => channels[channel]!.isospinChannel));
  const waves = sum.map(({ channel, waves }) => waves?.length ?? channels[channel]!.waves.length);
  if (isospin.size === 1 && waves.every((count) => count === 1)) return true;
  problems.add(
    path,
    "expected a single isospin channel in a single wave. Add the wave, such as `L=0`, or name the isospin multiplets.",
  );
  return false;
}

/** Key of the unknown sign of a reaction: entrance and exit by their daughters, isospin, and (L, S) of each. */
function reactionOf([entrance, exit]: readonly [WidthSum, WidthSum], { channels }: Known): string {
  const side = (sum: WidthSum) => {
    const { channel, waves } = sum[0]!;
    const { isospinChannel, waves: all, parent } = channels[channel]!;
    const { L, twoS } = all[waves?.[0] ?? 0]!;
    const members = isospinChannel.split(" -> ")[1]!;
    return { text: `${members} L=${L} S=${half(twoS)}`, twoI: parent.content[0]!.leg.state.twoI };
  };
  const [from, to] = [side(entrance), side(exit)];
  return `${from.text} -> ${to.text}, I=${half(from.twoI)}`;
}

/** Half an integer as people write it. */
function half(twice: number): string {
  return twice % 2 === 0 ? String(twice / 2) : `${twice}/2`;
}

/** All channels of a parent, averaged over the charge states a name stands for. */
function totalSum(name: string, path: string, context: Context, problems: Problems): WidthSum | undefined {
  const names = hadronsNamed(name, path, context.members, problems);
  if (names.size === 0) return undefined;
  const parents = context.parents.filter(({ hadron }) => names.has(hadron.name));
  if (parents.length === 0) {
    problems.add(path, `expected a parent that decays in this study, got ${JSON.stringify(name)}.`);
    return undefined;
  }
  return sumOfParents(parents);
}

function sumOfParents(parents: readonly Parent[]): WidthSum {
  return parents.flatMap(({ channels }) =>
    channels.map((channel) => ({ channel, weight: 1 / parents.length })),
  );
}

/**
 * What a fraction's numerator is divided by: the mean total width of the parents. A total width with an error that
 * enters the fit becomes a parameter with that width as its prior, once for each set of parents.
 */
function totalWidthOf(numerator: WidthSum, fitted: boolean, context: Context): Total {
  const names = parentNames(numerator, context);
  const parents = names.map((name) => context.parents.find(({ hadron }) => hadron.name === name)!);
  if (parents.some(({ total }) => total.kind === "sum")) return { kind: "sum", sum: sumOfParents(parents) };
  const mean = (of: (parent: Parent) => number) =>
    parents.reduce((sum, parent) => sum + of(parent), 0) / parents.length;
  const value = mean(({ total }) => total.widthMeV);
  const plus = mean(({ total }) => total.plusMeV);
  const minus = mean(({ total }) => total.minusMeV);
  if (!fitted || plus === 0 || minus === 0) return { kind: "fixed", widthMeV: value };
  const prior = { value, plus, minus };
  return {
    kind: "parameter",
    index: parameterIndex(context.parameters, {
      name: `total width ${names.join(", ")}`,
      kind: "total width",
      unit: "MeV",
      start: value,
      prior,
    }),
  };
}

/** Index of a parameter by its name; appended if it is new. */
function parameterIndex(parameters: Parameter[], parameter: Parameter): number {
  const known = parameters.findIndex(({ name }) => name === parameter.name);
  return known >= 0 ? known : parameters.push(parameter) - 1;
}

function normalisationOf(
  { normalisation, use }: StudyMeasurement,
  path: string,
  { study, parameters }: Context,
  problems: Problems,
): Observable["normalisation"] | undefined {
  if (normalisation === undefined || use === "table") return undefined;
  const error = study.normalisations[normalisation];
  if (error === undefined) {
    const known = Object.keys(study.normalisations).join(", ");
    problems.add(
      `${path}/normalisation`,
      `expected a name among \`normalisations\` (${known || "there are none"}), got ${JSON.stringify(normalisation)}.`,
    );
    return undefined;
  }
  const parameter = parameterIndex(parameters, {
    name: `normalisation ${normalisation}`,
    kind: "normalisation",
    unit: "1",
    start: 0,
    prior: { value: 0, plus: 1, minus: 1 },
  });
  return { parameter, error };
}
