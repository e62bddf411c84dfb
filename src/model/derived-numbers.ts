import { fAndD } from "../couplings/f-and-d.js";
import { isDetermined } from "../fit/determined.js";
import type { Minimum } from "../fit/minima.js";
import { decayHasFAndD, type Graded } from "./evaluate.js";
import { rotationAngle } from "./mixing-matrix.js";
import type { Decay, Mixing, Model } from "./model.js";

/** A number computed from fitted parameters. */
export interface DerivedNumber {
  readonly name: string;
  readonly value: number;
  /** Standard deviation, by linear propagation of the fit's covariance. */
  readonly error: number;
  /** False where the data leave a combination of parameters free that it depends on: value and error mean nothing. */
  readonly determined: boolean;
  readonly unit: string;
}

/** One of the ratios of `mixedRatios`; it has no unit, and is not finite where g_a is 0. */
export interface MixedRatio {
  readonly name: string;
  at(parameters: readonly number[]): Graded;
}

type Fitted = Pick<Minimum, "parameters" | "covariance">;

/** F, D and their ratios for each decay that has them, tied mixing angles, then what does not depend on free signs for each mixed pair. */
export function derivedNumbers(
  model: Model,
  { parameters, covariance, verdicts }: Pick<Minimum, "parameters" | "covariance" | "verdicts">,
): DerivedNumber[] {
  // The free directions as a covariance: what it gives an error is not determined.
  const free = parameters.map((_, i) =>
    parameters.map((_, j) => verdicts.degenerateDirections.reduce((sum, d) => sum + d[i]! * d[j]!, 0)),
  );
  const loose = new Map(
    numbersOf(model, { parameters, covariance: free }).map(({ name, error }) => [name, error]),
  );
  return numbersOf(model, { parameters, covariance }).map((number) => ({
    ...number,
    determined: isDetermined(loose.get(number.name)!, number.value, parameters),
  }));
}

type PlainNumber = Omit<DerivedNumber, "determined">;

function numbersOf(model: Model, minimum: Fitted): PlainNumber[] {
  return [
    ...model.decays.flatMap((decay) => fAndDOf(decay, model, minimum)),
    ...tiedAngles(model, minimum),
    ...mixedRatios(model).flatMap(({ name, at }) => {
      const { value, gradient } = at(minimum.parameters);
      if (!Number.isFinite(value)) return [];
      const error = Math.sqrt(Math.max(0, covarianceOf(gradient, gradient, minimum)));
      return [{ name, value, error, unit: "1" }];
    }),
  ];
}

/** Mixing angles that follow another pair's, in the study's convention. */
function tiedAngles({ mixing }: Model, minimum: Fitted): PlainNumber[] {
  return mixing.flatMap(({ states, rotations }) =>
    rotations.flatMap((rotation): PlainNumber[] => {
      const { sign, offset, parameter, tiedBy } = rotation;
      if (tiedBy === undefined) return [];
      const { value, slope } = rotationAngle(rotation, minimum.parameters);
      const error =
        parameter === undefined ? 0 : Math.abs(slope) * Math.sqrt(minimum.covariance[parameter]![parameter]!);
      return [{ name: `angle(${states.join(", ")})`, value: sign * (value - offset), error, unit: "rad" }];
    }),
  );
}

/** F, D and what is made of them, for a strong decay of an octet into two octets. */
function fAndDOf(decay: Decay, model: Model, minimum: Fitted): PlainNumber[] {
  if (!decayHasFAndD(decay)) return [];
  const rows = decay.couplingRows;
  const block = rows.map((a) => rows.map((b) => covarianceOf(a, b, minimum)));
  const { D, F, fOverD, alphaF, alphaD } = fAndD(
    dot(rows[0]!, minimum.parameters),
    dot(rows[1]!, minimum.parameters),
    block,
  );
  const unit = unitOf(rows[0]!, model) ?? unitOf(rows[1]!, model) ?? "1";
  const prefix = decay.name === "" ? "" : `${decay.name}.`;
  const named = {
    D: [D, unit],
    F: [F, unit],
    "F/D": [fOverD, "1"],
    alpha_F: [alphaF, "1"],
    alpha_D: [alphaD, "1"],
  } as const;
  return Object.entries(named).flatMap(([name, [estimate, ofUnit]]) =>
    estimate === null ? [] : [{ name: `${prefix}${name}`, ...estimate, unit: ofUnit }],
  );
}

/**
 * (g_b/g_a) tan theta of two mixed states, for every coupling of |b> against every one of |a> in the same decay.
 *
 * The sign of |b> is free, and turns the signs of theta and of all g_b; the product is what measurements fix. theta is the
 * angle between |a> and |b> in the sense of the study's convention: |1> = cos theta |a> + sin theta |b> or, for mesons,
 * |1> = cos theta |a> - sin theta |b>; where the study writes an angle in the quark basis it is theta too, not that angle.
 * Only pairs of decays that differ in |a> and |b> alone, with couplings of one unit, are compared.
 */
export function mixedRatios(model: Model): MixedRatio[] {
  return model.mixing.flatMap((mixing) => ratiosOf(mixing, model));
}

function ratiosOf({ states, bare, rotations }: Mixing, model: Model): MixedRatio[] {
  const [rotation, ...others] = rotations;
  if (rotation === undefined || others.length > 0) return [];
  const { sign, parameter } = rotation;
  const [a, b] = bare.map((text) => text.split("/")[0]!) as [string, string];
  const pairs = model.decays.flatMap((first) =>
    model.decays
      .filter((second) => isExchanged(first, second, a, b))
      .map((second) => [first, second] as const),
  );
  return pairs.flatMap(([ofA, ofB]) =>
    ofB.couplingRows.flatMap((rowB, j) =>
      ofA.couplingRows.flatMap((rowA, i): MixedRatio[] => {
        const unit = unitOf(rowA, model);
        if (unit === undefined || unit !== unitOf(rowB, model)) return [];
        return [
          {
            name: `${ofB.reduced[j]!.name}/${ofA.reduced[i]!.name} tan theta(${states.join(", ")})`,
            at: (parameters) => {
              const t = rotationAngle(rotation, parameters);
              const [theta, slope] = [sign * t.value, sign * t.slope];
              const gA = dot(rowA, parameters);
              const ratio = dot(rowB, parameters) / gA;
              const tangent = Math.tan(theta);
              const gradient = parameters.map(
                (_, k) =>
                  (((rowB[k] ?? 0) - ratio * (rowA[k] ?? 0)) / gA) * tangent +
                  (k === parameter ? (slope * ratio) / Math.cos(theta) ** 2 : 0),
              );
              return { value: ratio * tangent, gradient };
            },
          },
        ];
      }),
    ),
  );
}

/** Whether two decays are one but for a multiplet, `a` in the first and `b` in the second. */
function isExchanged(first: Decay, second: Decay, a: string, b: string): boolean {
  const legs = ({ from, to }: Decay) => [from, ...to].map(({ id }) => id);
  const [x, y] = [legs(first), legs(second)];
  const differing = x.flatMap((id, k) => (id === y[k] ? [] : [k]));
  const [place] = differing;
  return (
    first.L === second.L &&
    first.twoS === second.twoS &&
    differing.length === 1 &&
    x[place!] === a &&
    y[place!] === b
  );
}

/** Unit of a coupling that is a combination of the model's; undefined for one that a rule makes 0. */
function unitOf(row: readonly number[], model: Model): string | undefined {
  return model.parameters[row.findIndex((c) => c !== 0)]?.unit;
}

function covarianceOf(a: readonly number[], b: readonly number[], { covariance }: Fitted): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++)
    for (let j = 0; j < b.length; j++)
      if (a[i] !== 0 && b[j] !== 0) sum += a[i]! * covariance[i]![j]! * b[j]!;
  return sum;
}

function dot(row: readonly number[], parameters: readonly number[]): number {
  let sum = 0;
  for (let k = 0; k < row.length; k++) sum += row[k]! * parameters[k]!;
  return sum;
}
