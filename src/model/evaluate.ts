import { antisymmetricCouplingOfF, hasFAndD, symmetricCouplingOfD } from "../couplings/f-and-d.js";
import { STRONG } from "../couplings/operator.js";
import { rootToNumber } from "../exact/signed-root.js";
import { dot, type Graded, quotient, scaled, times } from "./graded.js";
import { type MixingMatrix, mixingMatrix } from "./mixing-matrix.js";
import type { Component, Decay, Model, Observable, PriorTarget, Total, Wave, WidthSum } from "./model.js";
import { type SharedAmplitudes, sharedAmplitudes } from "./shared-amplitudes.js";

export type { Graded } from "./graded.js";

/** A model made ready for many evaluations: every component's exact form as a row of numbers, once. */
export interface Evaluator {
  readonly model: Model;
  /** By channel, wave, component: weight times form, as coefficients of the model's couplings. */
  readonly rows: readonly (readonly (readonly (readonly number[])[])[])[];
  readonly shared: SharedAmplitudes;
}

/** The evaluator of a model. Here exact forms become numbers. */
export function evaluator(model: Model): Evaluator {
  const rows = model.channels.map(({ waves }) =>
    waves.map(({ components }) => components.map((component) => componentRow(model, component))),
  );
  return { model, rows, shared: sharedAmplitudes(model, rows) };
}

function componentRow(model: Model, { decay, weight, form }: Component): number[] {
  const row = new Array<number>(model.couplingCount).fill(0);
  const { couplingRows } = model.decays[decay]!;
  for (const { reduced, c } of form.terms) {
    const size = weight * rootToNumber(c);
    for (const [k, d] of couplingRows[reduced]!.entries()) row[k]! += size * d;
  }
  return row;
}

/** A model at one parameter vector. Amplitudes are computed when first asked for. */
export class Evaluation {
  readonly #evaluator: Evaluator;
  readonly #matrices: readonly MixingMatrix[];
  /** By `SharedAmplitudes.representatives`. */
  readonly #amplitudes: Graded[] = [];
  readonly model: Model;

  constructor(
    evaluator: Evaluator,
    readonly parameters: readonly number[],
  ) {
    this.#evaluator = evaluator;
    this.model = evaluator.model;
    this.#matrices = this.model.mixing.map((mixing) => mixingMatrix(mixing, parameters));
  }

  /** The mixing matrix of a group of the model, by its index. */
  mixing(index: number): MixingMatrix {
    return this.#matrices[index]!;
  }

  /**
   * Row r of a wave's flavour amplitude, length `couplingCount`: A = r . couplings at the present mixing angles,
   * without breaking.
   */
  amplitudeRow(channel: number, wave: number): number[] {
    const row = new Array<number>(this.model.couplingCount).fill(0);
    for (const [c, component] of this.#wave(channel, wave).components.entries()) {
      const size = this.#mixingFactor(component);
      for (const [k, d] of this.#evaluator.rows[channel]![wave]![c]!.entries()) row[k]! += size * d;
    }
    return row;
  }

  /** Flavour amplitude of a wave of a channel, in the coupling's unit, breaking included. */
  amplitude(channel: number, wave: number): Graded {
    const { index, factor } = this.#evaluator.shared.ofWave[channel]![wave]!;
    const shared = this.#sharedAmplitude(index);
    return factor === 1 ? shared : scaled(shared, factor);
  }

  #sharedAmplitude(index: number): Graded {
    const known = this.#amplitudes[index];
    if (known !== undefined) return known;
    const { channel, wave } = this.#evaluator.shared.representatives[index]!;
    const amplitude = this.#computedAmplitude(channel, wave);
    this.#amplitudes[index] = amplitude;
    return amplitude;
  }

  #computedAmplitude(channel: number, wave: number): Graded {
    const row = this.amplitudeRow(channel, wave);
    const gradient = this.#zero();
    for (let k = 0; k < row.length; k++) gradient[k] = row[k]!;
    let value = dot(row, this.parameters);
    const { components, breaking } = this.#wave(channel, wave);
    for (const [c, component] of components.entries()) {
      if (component.mixing.length === 0) continue;
      const bare = dot(this.#evaluator.rows[channel]![wave]![c]!, this.parameters);
      for (const { parameter, factor } of this.#mixingDerivatives(component))
        gradient[parameter]! += factor * bare;
    }
    if (breaking !== undefined) {
      const strength = this.couplingStrength(channel, wave);
      const size = this.model.study.fit.theoryError * this.model.channels[channel]!.isospinCoefficient;
      const z = this.parameters[breaking]!;
      value += size * strength.value * z;
      for (const [k, d] of strength.gradient.entries()) gradient[k]! += size * z * d;
      gradient[breaking]! += size * strength.value;
    }
    return { value, gradient };
  }

  /**
   * Length of the vector of reduced couplings behind a wave, in the coupling's unit: sqrt(sum over decays of U^2 |g|^2), with
   * U the mixing factor by which the decay enters, 1 without mixing.
   */
  couplingStrength(channel: number, wave: number): Graded {
    const gradient = this.#zero();
    let square = 0;
    const seen = new Set<number>();
    for (const component of this.#wave(channel, wave).components) {
      // Two orders of the daughters are one state.
      if (seen.has(component.decay)) continue;
      seen.add(component.decay);
      const factor = this.#mixingFactor(component);
      let length = 0;
      for (const row of this.model.decays[component.decay]!.couplingRows) {
        const g = dot(row, this.parameters);
        length += g * g;
        for (const [k, d] of row.entries()) gradient[k]! += factor * factor * g * d;
      }
      square += factor * factor * length;
      for (const { parameter, factor: derivative } of this.#mixingDerivatives(component))
        gradient[parameter]! += factor * derivative * length;
    }
    const value = Math.sqrt(square);
    return { value, gradient: value === 0 ? gradient.fill(0) : gradient.map((d) => d / value) };
  }

  /** K of a wave at the present masses. */
  kinematicFactor(channel: number, wave: number): number {
    const { kinematicFactor, massSlopes } = this.#wave(channel, wave);
    if (massSlopes.length === 0) return kinematicFactor;
    let exponent = 0;
    for (const { parameter, slope } of massSlopes) exponent += slope * this.#shift(parameter);
    return kinematicFactor * Math.exp(exponent);
  }

  /** Partial width of a channel in MeV, or of some of its waves: identical factor times the sum of |A|^2 K. */
  width(channel: number, waves?: readonly number[]): Graded {
    return this.widthSum([waves === undefined ? { channel, weight: 1 } : { channel, weight: 1, waves }]);
  }

  /** A weighted sum of partial widths in MeV. */
  widthSum(sum: WidthSum): Graded {
    const gradient = this.#zero();
    let value = 0;
    // Neighbours in a sum mostly share their amplitude: its square is multiplied with their phase space added up.
    let amplitude: Graded | undefined;
    let phaseSpace = 0;
    const add = () => {
      if (amplitude === undefined || phaseSpace === 0) return;
      value += phaseSpace * amplitude.value ** 2;
      const slope = 2 * phaseSpace * amplitude.value;
      for (let k = 0; k < gradient.length; k++) gradient[k]! += slope * amplitude.gradient[k]!;
    };
    for (const { channel, weight, waves } of sum) {
      const { identicalFactor, waves: all } = this.model.channels[channel]!;
      for (let w = 0; w < all.length; w++) {
        if (waves !== undefined && !waves.includes(w)) continue;
        const { index, factor } = this.#evaluator.shared.ofWave[channel]![w]!;
        const next = this.#sharedAmplitude(index);
        if (next !== amplitude) {
          add();
          amplitude = next;
          phaseSpace = 0;
        }
        const part = weight * identicalFactor * factor * factor * this.kinematicFactor(channel, w);
        phaseSpace += part;
        for (const { parameter, slope } of all[w]!.massSlopes)
          gradient[parameter]! += part * next.value ** 2 * slope;
      }
    }
    add();
    return { value, gradient };
  }

  /** A total width in MeV. */
  total(total: Total): Graded {
    if (total.kind === "fixed") return { value: total.widthMeV, gradient: this.#zero() };
    return total.kind === "parameter" ? this.#parameter(total.index) : this.widthSum(total.sum);
  }

  /** The model's value of an observable in its unit. Ratios with a vanishing denominator are infinite, 0/0 is 0. */
  observable(observable: Observable): Graded {
    const value = this.#unnormalised(observable);
    if (observable.normalisation === undefined) return value;
    const { parameter, error } = observable.normalisation;
    const factor = 1 + error * this.parameters[parameter]!;
    const gradient = value.gradient.map((d, k) => d * factor + (k === parameter ? error * value.value : 0));
    return { value: value.value * factor, gradient };
  }

  #unnormalised({ quantum }: Observable): Graded {
    switch (quantum.kind) {
      case "width":
      case "total":
        return this.widthSum(quantum.of);
      case "fraction":
        return quotient(this.widthSum(quantum.of), this.total(quantum.total));
      case "ratio":
        return quotient(this.widthSum(quantum.of), this.widthSum(quantum.over));
      case "product": {
        const total = this.total(quantum.total);
        return times(quotient(this.widthSum(quantum.of), total), quotient(this.widthSum(quantum.by), total));
      }
      case "amplitude": {
        const t = quotient(this.#isospinProduct(quantum.pair), this.total(quantum.total));
        return scaled(t, quantum.sign);
      }
      case "residue": {
        const product = this.#isospinProduct(quantum.pair);
        return scaled(product, (quantum.sign ?? (product.value < 0 ? -1 : 1)) / 2);
      }
      case "axial": {
        const gradient = this.#zero();
        for (const [k, d] of quantum.row.entries()) gradient[k] = d;
        return { value: dot(quantum.row, this.parameters), gradient };
      }
      case "parameter":
        return this.priorTarget(quantum.parameter);
    }
  }

  /** A_i A_f sqrt(k_i k_f) in MeV, where A is an isospin amplitude and k its phase space summed over charges. */
  #isospinProduct([entrance, exit]: readonly [WidthSum, WidthSum]): Graded {
    const [a, b] = [entrance, exit].map((sum): Graded => {
      const { channel, waves } = sum[0]!;
      const wave = waves?.[0] ?? 0;
      const coefficient = this.model.channels[channel]!.isospinCoefficient;
      const amplitude = this.amplitude(channel, wave);
      const slopes = this.#zero();
      let phaseSpace = 0;
      for (const { channel: c, weight } of sum) {
        const { identicalFactor, isospinCoefficient } = this.model.channels[c]!;
        const part = weight * identicalFactor * isospinCoefficient ** 2 * this.kinematicFactor(c, wave);
        phaseSpace += part;
        for (const { parameter, slope } of this.#wave(c, wave).massSlopes) slopes[parameter]! += part * slope;
      }
      const root = Math.sqrt(phaseSpace) / coefficient;
      const value = amplitude.value * root;
      const gradient = amplitude.gradient.map((d, k) =>
        phaseSpace === 0 ? 0 : d * root + (value * slopes[k]!) / (2 * phaseSpace),
      );
      return { value, gradient };
    });
    return times(a!, b!);
  }

  /** A parameter, or F, D or a ratio of them for a decay; infinite where the denominator vanishes. */
  priorTarget(target: PriorTarget): Graded {
    if ("parameter" in target) return this.#parameter(target.parameter);
    const decay = this.model.decays[target.decay]!;
    const [s, a] = decay.couplingRows.map((row) => this.#linear(row)) as [Graded, Graded];
    const d = scaled(s, 1 / rootToNumber(symmetricCouplingOfD()));
    const f = scaled(a, 1 / rootToNumber(antisymmetricCouplingOfF()));
    const sum = { value: d.value + f.value, gradient: d.gradient.map((x, k) => x + f.gradient[k]!) };
    const ofName = {
      D: () => d,
      F: () => f,
      "F/D": () => quotient(f, d),
      alpha_F: () => quotient(f, sum),
      alpha_D: () => quotient(d, sum),
    };
    return ofName[target.name]();
  }

  #linear(row: readonly number[]): Graded {
    const gradient = this.#zero();
    for (const [k, d] of row.entries()) gradient[k] = d;
    return { value: dot(row, this.parameters), gradient };
  }

  #parameter(index: number): Graded {
    const gradient = this.#zero();
    gradient[index] = 1;
    return { value: this.parameters[index]!, gradient };
  }

  #wave(channel: number, wave: number): Wave {
    return this.model.channels[channel]!.waves[wave]!;
  }

  #shift(parameter: number): number {
    return this.parameters[parameter]! - this.model.parameters[parameter]!.start;
  }

  #mixingFactor({ mixing }: Component): number {
    return mixing.reduce(
      (product, { mixing: m, state, bare }) => product * this.#matrices[m]!.value[state]![bare]!,
      1,
    );
  }

  /** Derivatives of a component's mixing factor, by parameter; a parameter may come up more than once. */
  #mixingDerivatives({ mixing }: Component): { parameter: number; factor: number }[] {
    return mixing.flatMap(({ mixing: m, state, bare }, k) => {
      const others = mixing.reduce(
        (product, e, j) => (j === k ? product : product * this.#matrices[e.mixing]!.value[e.state]![e.bare]!),
        1,
      );
      return this.#matrices[m]!.derivatives.map(({ parameter, value }) => ({
        parameter,
        factor: others * value[state]![bare]!,
      }));
    });
  }

  #zero(): number[] {
    return new Array<number>(this.model.parameters.length).fill(0);
  }
}

/** Whether F and D are defined for a decay: a strong decay of an octet into two octets with both couplings. */
export function decayHasFAndD(decay: Decay): boolean {
  return decay.reduced.length === 2 && hasFAndD({ ...decay, operator: STRONG });
}
