import { rootToNumber } from "../exact/signed-root.js";
import type { Channel, Denominator, Model, Observable, Wave, WidthSum } from "./model.js";

/** A value with its derivatives with respect to all parameters of the model. */
export interface Graded {
  readonly value: number;
  readonly gradient: readonly number[];
}

/**
 * The row vector r of a wave, length `model.couplingCount`: its flavour amplitude is r . couplings. Here exact forms
 * meet mixing weights and become numbers.
 */
export function amplitudeRow(model: Model, wave: Wave): number[] {
  const row = new Array<number>(model.couplingCount).fill(0);
  const { firstParameter } = model.decays[wave.decay]!;
  for (const { weight, form } of wave.components) {
    for (const { reduced, c } of form.terms) row[firstParameter + reduced]! += weight * rootToNumber(c);
  }
  return row;
}

/** A model made ready for many evaluations: every wave's row vector, once. */
export interface Evaluator {
  readonly model: Model;
  /** By channel, then wave. */
  readonly rows: readonly (readonly (readonly number[])[])[];
}

/** The evaluator of a model. */
export function evaluator(model: Model): Evaluator {
  return {
    model,
    rows: model.channels.map((channel) => channel.waves.map((wave) => amplitudeRow(model, wave))),
  };
}

/** Flavour amplitude of each wave of a channel, in the coupling's unit. */
export function flavourAmplitudes(
  evaluation: Evaluator,
  channel: number,
  parameters: readonly number[],
): number[] {
  return evaluation.rows[channel]!.map((row) => dot(row, parameters));
}

/** Partial width of a channel in MeV: identical factor times the sum over waves of |A|^2 K, with its gradient. */
export function channelWidth(evaluation: Evaluator, index: number, parameters: readonly number[]): Graded {
  const channel: Channel = evaluation.model.channels[index]!;
  const gradient = new Array<number>(parameters.length).fill(0);
  let value = 0;
  for (const [w, row] of evaluation.rows[index]!.entries()) {
    const amplitude = dot(row, parameters);
    const scale = channel.identicalFactor * channel.waves[w]!.kinematicFactor;
    value += scale * amplitude * amplitude;
    for (let k = 0; k < row.length; k++) gradient[k]! += 2 * scale * amplitude * row[k]!;
  }
  return { value, gradient };
}

/** A weighted sum of partial widths in MeV, with its gradient. */
export function widthSum(evaluation: Evaluator, sum: WidthSum, parameters: readonly number[]): Graded {
  const gradient = new Array<number>(parameters.length).fill(0);
  let value = 0;
  for (const { channel, weight } of sum) {
    const width = channelWidth(evaluation, channel, parameters);
    value += weight * width.value;
    for (let k = 0; k < gradient.length; k++) gradient[k]! += weight * width.gradient[k]!;
  }
  return { value, gradient };
}

/**
 * The model's value of an observable, in its unit, with its gradient. A ratio whose denominator vanishes is infinite;
 * 0/0 counts as 0.
 */
export function observableValue(
  evaluation: Evaluator,
  observable: Observable,
  parameters: readonly number[],
): Graded {
  const numerator = widthSum(evaluation, observable.numerator, parameters);
  const denominator = denominatorValue(evaluation, observable.denominator, parameters);
  if (numerator.value === 0 && denominator.value === 0) {
    return { value: 0, gradient: numerator.gradient.map(() => 0) };
  }
  const value = numerator.value / denominator.value;
  return {
    value,
    gradient: numerator.gradient.map((d, k) => (d - value * denominator.gradient[k]!) / denominator.value),
  };
}

function denominatorValue(
  evaluation: Evaluator,
  denominator: Denominator,
  parameters: readonly number[],
): Graded {
  const gradient = new Array<number>(parameters.length).fill(0);
  switch (denominator.kind) {
    case "one":
      return { value: 1, gradient };
    case "fixed":
      return { value: denominator.widthMeV, gradient };
    case "parameter":
      gradient[denominator.index] = 1;
      return { value: parameters[denominator.index]!, gradient };
    case "sum":
      return widthSum(evaluation, denominator.sum, parameters);
  }
}

function dot(row: readonly number[], parameters: readonly number[]): number {
  let sum = 0;
  for (let k = 0; k < row.length; k++) sum += row[k]! * parameters[k]!;
  return sum;
}
