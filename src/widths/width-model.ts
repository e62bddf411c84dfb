import { refuse, requireInteger } from "../require.js";
import { barrierModel } from "./barrier-model.js";
import { breakupMomentumMeV } from "./breakup-momentum.js";
import { effectiveBaryonModel } from "./effective-baryon-model.js";
import { effectiveMesonModel } from "./effective-meson-model.js";
import { powerLawModel } from "./power-law-model.js";
import { rangeModel } from "./range-model.js";
import type {
  KinematicFactor,
  Vertex,
  WidthModelDefinition,
  WidthModelOption,
  WidthModelOptions,
} from "./width-model-definition.js";

/** Every width model, in the order of their ids. */
const MODELS: readonly WidthModelDefinition[] = [
  powerLawModel,
  rangeModel,
  barrierModel,
  effectiveBaryonModel,
  effectiveMesonModel,
];

/** Largest orbital angular momentum a width is computed for; well above any measured decay. */
const LARGEST_L = 12;

/**
 * A width model with its constants chosen: Gamma = s |A|^2 K, and K is `kinematicFactorMeV`.
 *
 * Model and constants are part of the meaning of a coupling: one fitted with this model goes into no other.
 */
export interface WidthModel {
  readonly id: string;
  readonly title: string;
  readonly formula: string;
  readonly source: string;
  /** Every option of the model with its value, defaults filled in; units are in the names. */
  readonly options: WidthModelOptions;
  /** Unit of the amplitude A: `1`, `MeV` or `1/MeV`. Throws InputError for a vertex the model has no formula for. */
  amplitudeUnit(vertex: Vertex): string;
  /** K of one wave for many masses above threshold. Throws InputError for a vertex the model has no formula for. */
  factorMeV(vertex: Vertex): KinematicFactor;
  /**
   * K in MeV times the inverse square of the amplitude's unit; 0 at and below threshold, never NaN.
   * Throws InputError for an impossible mass or L, or a vertex the model has no formula for.
   */
  kinematicFactorMeV(parentMeV: number, firstMeV: number, secondMeV: number, vertex: Vertex): number;
}

/** Definitions of all width models: ids, formulas, sources, options with units, defaults and ranges. */
export function widthModelDefinitions(): readonly WidthModelDefinition[] {
  return MODELS;
}

/**
 * The width model of an id, with its options checked and completed.
 *
 * @param id - `a`, `b`, `c`, `d` or `e`; see `widthModelDefinitions`
 * @param options - values by name; the ones left out take their default
 * @throws InputError for an unknown id or option, or a value out of range; says what there is
 * @example widthModel("a", { n: 1 }).kinematicFactorMeV(1232, 938.919, 138.039, { L: 1 }) // 9.53...
 */
export function widthModel(id: string, options: WidthModelOptions = {}): WidthModel {
  const definition = MODELS.find((model) => model.id === id);
  if (definition === undefined) {
    const known = MODELS.map((model) => `${model.id} (${model.title})`).join(", ");
    refuse(
      "widthModel: id",
      `one of ${MODELS.map((model) => model.id).join(", ")}`,
      id,
      `Choose from: ${known}.`,
    );
  }
  const values = completedOptions(definition, options);
  const { title, formula, source } = definition;
  return {
    id,
    title,
    formula,
    source,
    options: values,
    amplitudeUnit(vertex) {
      checkVertex(definition, vertex);
      return definition.amplitudeUnit(vertex);
    },
    factorMeV(vertex) {
      checkVertex(definition, vertex);
      return definition.factorMeV(vertex, values);
    },
    kinematicFactorMeV(parentMeV, firstMeV, secondMeV, vertex) {
      checkVertex(definition, vertex);
      const momentumMeV = breakupMomentumMeV(parentMeV, firstMeV, secondMeV);
      if (momentumMeV === 0) return 0;
      return definition.factorMeV(vertex, values)({ parentMeV, firstMeV, secondMeV, momentumMeV });
    },
  };
}

/** Whether two models are the same for a vertex: one id, and one value of every option that K of the vertex depends on. */
export function isSameModel(one: WidthModel, other: WidthModel, vertex: Vertex): boolean {
  if (one.id !== other.id) return false;
  return MODELS.find(({ id }) => id === one.id)!.options.every(
    ({ name, concerns }) =>
      one.options[name] === other.options[name] || (concerns !== undefined && !concerns(vertex)),
  );
}

function checkVertex(definition: WidthModelDefinition, vertex: Vertex): void {
  requireInteger(
    `width model ${definition.id}: L`,
    vertex.L,
    0,
    "Give the orbital angular momentum.",
    LARGEST_L,
  );
  definition.requireVertex(vertex);
}

function completedOptions(definition: WidthModelDefinition, options: WidthModelOptions): WidthModelOptions {
  const known = definition.options.map((option) => option.name);
  for (const name of Object.keys(options)) {
    if (known.includes(name)) continue;
    const there = known.length === 0 ? "no options" : `an option among ${known.join(", ")}`;
    refuse(`width model ${definition.id}: option`, there, name, "Remove it or mend its name.");
  }
  return Object.fromEntries(
    definition.options.map((option) => [option.name, optionValue(definition.id, option, options)]),
  );
}

function optionValue(id: string, option: WidthModelOption, options: WidthModelOptions): number {
  const value = options[option.name] ?? option.default;
  const { minimum, maximum, unit, integer } = option;
  const inRange = Number.isFinite(value) && value >= minimum && value <= maximum;
  if (inRange && (!integer || Number.isInteger(value))) return value;
  const kind = integer ? "an integer" : "a number";
  const ofUnit = unit === "1" ? "" : ` ${unit}`;
  refuse(
    `width model ${id}: ${option.name}`,
    `${kind} from ${minimum} to ${maximum}${ofUnit}`,
    value,
    `It is ${option.meaning}; the default is ${option.default}${ofUnit}.`,
  );
}
