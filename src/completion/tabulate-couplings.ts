import {
  antisymmetricCouplingOfF,
  type FAndDForm,
  fAndDForm,
  symmetricCouplingOfD,
} from "../couplings/f-and-d.js";
import type { FormTerm } from "../couplings/form.js";
import { isospinConstantName, isospinConstants } from "../couplings/isospin-lagrangian.js";
import { MatrixConvention } from "../couplings/matrix-convention.js";
import { STRONG } from "../couplings/operator.js";
import { addRoots } from "../exact/root-sum.js";
import {
  divideRoots,
  multiplyRoots,
  negateRoot,
  rootToNumber,
  type SignedRoot,
  signedRoot,
  ZERO_ROOT,
} from "../exact/signed-root.js";
import type { Leg } from "../hadrons/hadron.js";
import { decayHasFAndD, Evaluation, evaluator, type Graded } from "../model/evaluate.js";
import type { Fit, StudyMinimum } from "../model/fit-model.js";
import type { Channel, Component, MixingElement, Model } from "../model/model.js";
import { requireIdentity } from "../require.js";
import { clebschGordan } from "../su2/clebsch-gordan.js";
import type { State } from "../su3/state.js";
import type {
  Coupling,
  CouplingComponent,
  CouplingTable,
  DecayConstants,
  ReducedValue,
} from "./coupling-table.js";
import type { Estimate } from "./tables.js";

/**
 * The couplings of all vertices of a fitted study, exact and as numbers with errors, closed channels included.
 *
 * Values are linear in the couplings; errors come from the fit's covariance, and `breaking` is the study's breaking
 * times |g|, as in predictions of widths. The sign of all couplings of one decaying multiplet is free.
 */
export function couplingTable(fit: Fit, minimumIndex: number): CouplingTable {
  const maker = new CouplingMaker(fit, fit.minima[minimumIndex]!);
  return {
    fit,
    minimum: minimumIndex,
    reduced: maker.reducedValues(),
    isospin: maker.isospinRows(),
    charged: maker.chargedRows(),
    constants: maker.constants(),
  };
}

class CouplingMaker {
  readonly #model: Model;
  readonly #evaluation: Evaluation;
  readonly #matrices = new MatrixConvention();

  constructor(
    fit: Fit,
    private readonly minimum: StudyMinimum,
  ) {
    this.#model = fit.model;
    this.#evaluation = new Evaluation(evaluator(fit.model), minimum.vector);
  }

  reducedValues(): ReducedValue[] {
    return this.#model.decays.flatMap(({ couplingRows }, decay) =>
      couplingRows.map((row, reduced) => ({
        decay,
        reduced,
        value: this.#estimate(this.#linear(row), 0),
        unit: this.#unitOf(decay),
      })),
    );
  }

  chargedRows(): Coupling[] {
    return this.#model.channels.flatMap((channel, index) =>
      channel.waves.map((_, wave) => this.#chargedRow(channel, index, wave)),
    );
  }

  /** One row for each isospin channel and wave, from the first charge channel that has it. */
  isospinRows(): Coupling[] {
    const seen = new Set<string>();
    return this.#model.channels.flatMap((channel, index) =>
      channel.waves.flatMap(({ L, twoS }, wave) => {
        const key = `${channel.isospinChannel}/${L}/${twoS}`;
        if (seen.has(key)) return [];
        seen.add(key);
        return [this.#isospinRow(channel, index, wave)];
      }),
    );
  }

  constants(): DecayConstants[] {
    return this.#model.decays.flatMap((_, decay) => {
      if (!this.#isOfBaryonOctets(decay)) return [];
      const [s, a] = this.#model.decays[decay]!.couplingRows;
      const perD = 1 / rootToNumber(symmetricCouplingOfD());
      const perF = 1 / rootToNumber(antisymmetricCouplingOfF());
      const constants = isospinConstants().map((constant) => {
        const [ofD, ofF] = [perD * rootToNumber(constant.D), perF * rootToNumber(constant.F)];
        const row = s!.map((_, k) => ofD * s![k]! + ofF * a![k]!);
        return { ...constant, value: this.#estimate(this.#linear(row), 0) };
      });
      return [{ decay, unit: this.#unitOf(decay), constants }];
    });
  }

  #chargedRow(channel: Channel, index: number, wave: number): Coupling {
    const components = this.#components(channel, wave);
    const amplitude = this.#evaluation.amplitude(index, wave);
    const breaking = this.#breaking(index, wave) * Math.abs(channel.isospinCoefficient);
    const phase = commonPhase(
      components.map(({ legs }) => this.#matrices.couplingPhase(legs.map(({ state }) => state))),
    );
    return {
      ...this.#common(channel, index, wave, components, channel.id),
      value: this.#estimate(amplitude, breaking),
      matrixValue: phase === undefined ? null : this.#estimate(scaled(amplitude, phase), breaking),
      breakingShift: this.#breakingShift(index, wave, amplitude),
      constant: null,
    };
  }

  #isospinRow(channel: Channel, index: number, wave: number): Coupling {
    const components = this.#components(channel, wave).map((component) =>
      isospinComponent(component, channel.isospinCoefficient),
    );
    const amplitude = scaled(this.#evaluation.amplitude(index, wave), 1 / channel.isospinCoefficient);
    const shift = this.#breakingShift(index, wave, this.#evaluation.amplitude(index, wave));
    const [first, ...others] = components;
    const isOne = first !== undefined && others.length === 0 && this.#isOfBaryonOctets(first.decay);
    const places = first?.legs.map(({ state }) => state) as [State, State, State];
    return {
      ...this.#common(channel, index, wave, components, channel.isospinChannel),
      value: this.#estimate(amplitude, this.#breaking(index, wave)),
      matrixValue: null,
      breakingShift: shift === null ? null : shift / channel.isospinCoefficient,
      constant: isOne ? (isospinConstantName(places) ?? null) : null,
    };
  }

  #common(
    channel: Channel,
    index: number,
    wave: number,
    components: readonly CouplingComponent[],
    id: string,
  ): Pick<Coupling, "id" | "channel" | "wave" | "components" | "unit"> {
    const unit = this.#unitOf(channel.waves[wave]!.components[0]!.decay);
    return { id, channel: index, wave, components, unit };
  }

  /** Components of a wave; the two orders of daughters from one multiplet make one. */
  #components(channel: Channel, wave: number): CouplingComponent[] {
    const groups = new Map<string, Component[]>();
    for (const component of channel.waves[wave]!.components) {
      const { decay, mixing, form } = component;
      const key = JSON.stringify([decay, form.initial, sortedTexts(form.finals), sortedTexts(mixing)]);
      groups.set(key, [...(groups.get(key) ?? []), component]);
    }
    return [...groups.values()].map((group) => this.#component(group));
  }

  #component(group: readonly Component[]): CouplingComponent {
    const { decay, form, mixing } = group[0]!;
    const { from, to, reduced } = this.#model.decays[decay]!;
    const legs = [form.initial, ...form.finals] as unknown as [Leg, Leg, Leg];
    const states = legs.map(({ state }) => state);
    const terms = reduced.flatMap((_, index): FormTerm[] => {
      const roots = group.flatMap((component) => {
        const c = component.form.terms.find((term) => term.reduced === index)?.c;
        return c === undefined ? [] : [multiplyRoots(exactWeight(component.weight), c)];
      });
      return addRoots(roots).map((c) => ({ reduced: index, c }));
    });
    const scheme = { from, to, operator: STRONG, L: 0, twoS: 0 };
    const inGroup = decayHasFAndD(this.#model.decays[decay]!) ? fAndDForm(terms, scheme) : null;
    return {
      decay,
      legs,
      weight: this.#mixingWeight(mixing),
      terms: terms.map((term) => ({
        reduced: term.reduced,
        group: term.c,
        matrix: this.#matrices.coefficient(term.c, states),
      })),
      fAndD:
        inGroup === null
          ? null
          : { group: inGroup, matrix: mapped(inGroup, (c) => this.#matrices.coefficient(c, states)!) },
    };
  }

  #mixingWeight(mixing: readonly MixingElement[]): number {
    return mixing.reduce(
      (product, element) =>
        product * this.#evaluation.mixing(element.mixing).value[element.state]![element.bare]!,
      1,
    );
  }

  #isOfBaryonOctets(decay: number): boolean {
    const { from, to } = this.#model.decays[decay]!;
    return decayHasFAndD(this.#model.decays[decay]!) && from.baryonNumber === 1 && to[0].baryonNumber === 1;
  }

  #unitOf(decay: number): string {
    const { couplingRows } = this.#model.decays[decay]!;
    const index = this.#model.parameters.findIndex((_, k) => couplingRows.some((row) => row[k]));
    return this.#model.parameters[index]!.unit;
  }

  #breaking(channel: number, wave: number): number {
    return this.#model.study.breaking * this.#evaluation.couplingStrength(channel, wave).value;
  }

  #breakingShift(channel: number, wave: number, amplitude: Graded): number | null {
    if (this.#model.channels[channel]!.waves[wave]!.breaking === undefined) return null;
    return amplitude.value - this.#dot(this.#evaluation.amplitudeRow(channel, wave));
  }

  /** A linear combination of the couplings; the gradient has every parameter of the model. */
  #linear(row: readonly number[]): Graded {
    return { value: this.#dot(row), gradient: this.minimum.vector.map((_, k) => row[k] ?? 0) };
  }

  #dot(row: readonly number[]): number {
    return row.reduce((sum, d, k) => sum + d * this.minimum.vector[k]!, 0);
  }

  #estimate({ value, gradient }: Graded, breaking: number): Estimate {
    const { covariance } = this.minimum;
    const variance = gradient.reduce(
      (sum, d, i) => sum + gradient.reduce((part, e, j) => part + d * covariance[i]![j]! * e, 0),
      0,
    );
    const error = Math.sqrt(Math.max(0, variance));
    return { value: value === 0 ? 0 : value, plus: error, minus: error, breaking };
  }
}

/** A component for the whole isospin channel: coefficients over the SU(2) one that leads to the charge state. */
function isospinComponent(component: CouplingComponent, channelCoefficient: number): CouplingComponent {
  const [r, a, b] = component.legs.map(({ state }) => state) as [State, State, State];
  const own = clebschGordan(a.twoI, a.twoI3, b.twoI, b.twoI3, r.twoI, r.twoI3);
  const coefficient = own.sign * channelCoefficient > 0 ? own : negateRoot(own);
  const over = (c: SignedRoot) => divideRoots(c, coefficient);
  return {
    ...component,
    terms: component.terms.map(({ reduced, group }) => ({ reduced, group: over(group), matrix: null })),
    fAndD: component.fAndD && { group: mapped(component.fAndD.group, over), matrix: null },
  };
}

function mapped({ D, F }: FAndDForm, change: (c: SignedRoot) => SignedRoot): FAndDForm {
  return { D: change(D), F: change(F) };
}

function scaled({ value, gradient }: Graded, by: number): Graded {
  return { value: value * by, gradient: gradient.map((d) => d * by) };
}

/** The weight of two exchanged daughters as an exact number: 1, sqrt(1/2) or sqrt(2), with its sign. */
function exactWeight(weight: number): SignedRoot {
  const twice = Math.round(2 * weight * weight);
  const root = weight === 0 ? ZERO_ROOT : signedRoot(Math.sign(weight), twice, 2);
  requireIdentity(
    "couplingTable",
    Math.abs(rootToNumber(root) - weight) < 1e-12,
    () => `weight ${weight} is no root of a half-integer`,
  );
  return root;
}

function sortedTexts(values: readonly unknown[]): string[] {
  return values.map((value) => JSON.stringify(value)).sort();
}

/** The phase all components share; undefined if they do not, or one has none. */
function commonPhase(phases: readonly (1 | -1 | undefined)[]): 1 | -1 | undefined {
  return phases.every((phase) => phase === phases[0]) ? phases[0] : undefined;
}
