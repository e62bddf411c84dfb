import type {
  Coupling,
  CouplingComponent,
  CouplingTable,
  DecayConstants,
  ReducedValue,
} from "../completion/coupling-table.js";
import type { Estimate } from "../completion/tables.js";
import type { FAndDForm } from "../couplings/f-and-d.js";
import { ISOSPIN_LAGRANGIAN, ISOSPIN_MULTIPLETS } from "../couplings/isospin-lagrangian.js";
import { MATRIX_CONVENTION, MatrixConvention, OCTET_LAGRANGIAN } from "../couplings/matrix-convention.js";
import type { Reduced } from "../couplings/reduced-coupling.js";
import { couplet } from "../gen/couplet.js";
import { catalogueMultiplet } from "../hadrons/catalogue-multiplet.js";
import type { Hadron } from "../hadrons/hadron.js";
import { hadronOfState } from "../hadrons/multiplet.js";
import { parseChannel } from "../model/channel-names.js";
import type { Model } from "../model/model.js";
import { studyWarnings } from "../model/validity.js";
import { CONVENTION } from "../su3/isoscalar-factors.js";
import { estimateMessage, fitMessage, headerMessage } from "./encode-decays.js";
import { exactMessage } from "./exact-message.js";
import { sealBytes } from "./sealed-bytes.js";
import { optionMessages } from "./wave-options.js";

import v1 = couplet.v1;

/** Lowest minor version of the schema a reader of our coupling tables must know. */
export const COUPLINGS_SCHEMA_MINOR = 0;

/** What the basis states of other irreps than the octet are in the matrix convention. */
const TENSORS: readonly string[] = [
  "(p, 0): symmetric tensors T with p upper indices, normalised components, phase +1; decuplet: T_111 = Delta++, T_112 = Delta+/sqrt3, T_123 = Sigma(1385)0/sqrt6, T_333 = Omega-; vertex T^abc B_ae M_bf eps_efc.",
  "(0, q): their conjugates with q lower indices, phase -1 for each ubar; 3bar = (dbar, -ubar; sbar).",
];

/** A coupling table as the bytes of a sealed `couplet.v1.CouplingTables` file. The same table gives the same bytes. */
export function encodeCouplings(table: CouplingTable): Uint8Array {
  return sealBytes(v1.CouplingTables.encode(couplingsMessage(table)).finish());
}

/** A coupling table as a message, without the digest. */
export function couplingsMessage(table: CouplingTable): v1.CouplingTables.$Properties {
  const { fit, minimum } = table;
  const { model } = fit;
  return {
    kind: "couplet.v1.CouplingTables",
    header: { ...headerMessage(model, studyWarnings(fit, minimum)), schemaMinor: COUPLINGS_SCHEMA_MINOR },
    fit: fitMessage(fit, minimum),
    matrixConvention: matrixConventionMessage(),
    reduced: table.reduced.map((value) => reducedMessage(value, model)),
    isospin: table.isospin.map((row) => couplingMessage(row, table, false)),
    charged: table.charged.map((row) => couplingMessage(row, table, true)),
    isospinLagrangians: table.constants.map((constants) => lagrangianMessage(constants, model)),
  };
}

function matrixConventionMessage(): v1.MatrixConvention.$Properties {
  const convention = new MatrixConvention();
  const octets = { B: "baryon-octet", M: "pseudoscalar-octet" };
  return {
    id: MATRIX_CONVENTION,
    lagrangian: OCTET_LAGRANGIAN,
    octets: Object.entries(octets).map(([symbol, id]) => ({
      symbol,
      entries: convention.octetLayout().map(({ row, column, parts }) => ({
        row,
        column,
        parts: parts.map(({ state, times }) => ({
          hadron: hadronOfState(catalogueMultiplet(id), state)!.name,
          times: exactMessage(times),
        })),
      })),
    })),
    tensors: [...TENSORS],
    phases: convention.octetPhases(),
  };
}

function reducedMessage(
  { decay, reduced, value, unit }: ReducedValue,
  model: Model,
): v1.ReducedCoupling.$Properties {
  const { from, to, L, twoS, reduced: couplings } = model.decays[decay]!;
  const coupling = couplings[reduced]!;
  return {
    name: coupling.name,
    from: from.id,
    to: to.map(({ id }) => id),
    ...lastStep(coupling),
    twoL: 2 * L,
    twoS,
    value: fittedMessage(value),
    unit,
  };
}

function lastStep({ path }: Reduced): { irrep: v1.Irrep.$Properties; copy: number } {
  const { irrep, copy } = path.at(-1)!;
  return { irrep: { ...irrep }, copy };
}

/** A row; by isospin its hadrons are whole multiplets, named in its id. */
function couplingMessage(
  row: Coupling,
  { fit, minimum }: CouplingTable,
  charged: boolean,
): v1.Coupling.$Properties {
  const channel = fit.model.channels[row.channel]!;
  const { L, twoS, model } = channel.waves[row.wave]!;
  const [parent, ...daughters] = charged
    ? [channel.parent, ...channel.daughters].map(vertexHadron)
    : isospinNames(row.id);
  return {
    id: row.id,
    parent: parent!,
    daughters,
    twoL: 2 * L,
    twoS,
    components: row.components.map((component) => componentMessage(component, fit.model, charged)),
    convention: CONVENTION,
    value: estimateMessage(row.value),
    sign: Math.sign(row.value.value),
    ...(row.matrixValue === null
      ? {}
      : {
          matrixConvention: MATRIX_CONVENTION,
          matrixValue: estimateMessage(row.matrixValue),
          matrixSign: Math.sign(row.matrixValue.value),
        }),
    unit: row.unit,
    model: model.id,
    options: optionMessages(model),
    identicalFactor: channel.identicalFactor,
    minimum,
    breakingShift: row.breakingShift,
    isospinConstant: row.constant,
  };
}

function vertexHadron({ name, mcNumber }: Hadron): v1.VertexHadron.$Properties {
  return { name, mcNumber };
}

function isospinNames(id: string): v1.VertexHadron.$Properties[] {
  const { parent, daughters } = parseChannel(id)!;
  return [parent, ...daughters].map((name) => ({ name }));
}

function componentMessage(
  { decay, legs, weight, terms, fAndD }: CouplingComponent,
  { decays }: Model,
  charged: boolean,
): v1.CouplingComponent.$Properties {
  const { reduced } = decays[decay]!;
  return {
    states: legs.map(({ multiplet, state }) => {
      const { irrep, threeY, twoI, twoI3 } = state;
      return { multiplet, state: { irrep: { ...irrep }, threeY, twoI, twoI3: charged ? twoI3 : null } };
    }),
    weight,
    terms: terms.map((term) => ({
      reduced: reduced[term.reduced]!.name,
      ...lastStep(reduced[term.reduced]!),
      coefficient: exactMessage(term.group),
      ...(term.matrix === null ? {} : { matrixCoefficient: exactMessage(term.matrix) }),
    })),
    ...(fAndD === null ? {} : { dAndF: dAndFMessage(fAndD.group) }),
    ...(fAndD?.matrix == null ? {} : { matrixDAndF: dAndFMessage(fAndD.matrix) }),
  };
}

function dAndFMessage({ D, F }: FAndDForm): v1.DAndF.$Properties {
  return { d: exactMessage(D), f: exactMessage(F) };
}

function lagrangianMessage(
  { decay, unit, constants }: DecayConstants,
  { decays }: Model,
): v1.IsospinLagrangian.$Properties {
  const { from, to, L, twoS } = decays[decay]!;
  return {
    convention: ISOSPIN_LAGRANGIAN,
    multiplets: ISOSPIN_MULTIPLETS,
    from: from.id,
    to: to.map(({ id }) => id),
    twoL: 2 * L,
    twoS,
    unit,
    constants: constants.map(({ name, vertex, value, ...dAndF }) => ({
      name,
      vertex,
      dAndF: dAndFMessage(dAndF),
      value: fittedMessage(value),
    })),
  };
}

/** A fitted number; breaking belongs to vertices, not to it. */
function fittedMessage(value: Estimate): v1.Estimate.$Properties {
  return { ...estimateMessage(value), breaking: null };
}
