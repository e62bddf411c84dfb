import { couplet } from "../gen/couplet.js";
import { type WidthModel, widthModel } from "../widths/width-model.js";
import type { SpinParity, Vertex } from "../widths/width-model-definition.js";
import type { ParentEvaluator } from "./parent-evaluator.js";

import v1 = couplet.v1;

/** One partial wave: width(m) = strength K(m). */
interface EvaluatedWave {
  readonly model: WidthModel;
  readonly vertex: Vertex;
  readonly firstMeV: number;
  readonly secondMeV: number;
  readonly strength: number;
}

/**
 * The evaluator of a decay table's own closed forms: each wave keeps its part of the row's width at the nominal mass
 * and follows its width model's K from there; a wave closed at the nominal mass has the fit's amplitude instead.
 *
 * A row without waves, such as the remainder, keeps its width where any other row is open, and is 0 below.
 *
 * @param hadrons - the table's parents and externals by name: the daughters' masses and spins
 * @throws InputError for a model or option this version does not know
 */
export function closedFormEvaluator(
  parent: v1.Parent,
  hadrons: ReadonlyMap<string, v1.Hadron.$Properties>,
): ParentEvaluator {
  const rows = parent.rows.map((row) => wavesOf(parent, row, hadrons));
  const constants = parent.rows.map((row, k) => (rows[k]!.length === 0 ? (row.width?.value ?? 0) : 0));
  return {
    rowCount: rows.length,
    widthsInto(massMeV, widths, offset) {
      let total = 0;
      for (let k = 0; k < rows.length; k++) {
        const width = widthOf(rows[k]!, massMeV);
        widths[offset + k] = width;
        total += width;
      }
      if (total === 0) return 0;
      for (let k = 0; k < rows.length; k++) {
        widths[offset + k]! += constants[k]!;
        total += constants[k]!;
      }
      return total;
    },
  };
}

function widthOf(waves: readonly EvaluatedWave[], massMeV: number): number {
  let width = 0;
  for (const { model, vertex, firstMeV, secondMeV, strength } of waves) {
    if (strength > 0) width += strength * model.kinematicFactorMeV(massMeV, firstMeV, secondMeV, vertex);
  }
  return width;
}

function wavesOf(
  parent: v1.Parent,
  row: v1.Row.$Properties,
  hadrons: ReadonlyMap<string, v1.Hadron.$Properties>,
): EvaluatedWave[] {
  const daughters = (row.daughters ?? []).map(({ name }) => hadrons.get(name ?? ""));
  const [first, second] = daughters;
  if (first === undefined || second === undefined) return [];
  const spins = [parent.hadron, first, second].map(spinParity);
  return (row.waves ?? []).map((wave) => {
    const options = Object.fromEntries((wave.options ?? []).map(({ name, value }) => [name, value ?? 0]));
    const model = widthModel(wave.model ?? "", options);
    const vertex: Vertex = {
      L: (wave.twoL ?? 0) / 2,
      parent: spins[0]!,
      daughters: [spins[1]!, spins[2]!],
    };
    const masses = { firstMeV: first.mass ?? 0, secondMeV: second.mass ?? 0 };
    const nominal = model.kinematicFactorMeV(
      parent.hadron.mass ?? 0,
      masses.firstMeV,
      masses.secondMeV,
      vertex,
    );
    const width = (wave.re ?? 0) ** 2 + (wave.im ?? 0) ** 2;
    const strength =
      nominal > 0 ? width / nominal : (row.identicalFactor ?? 1) * (wave.flavourAmplitude ?? 0) ** 2;
    return { model, vertex, ...masses, strength };
  });
}

function spinParity(hadron: v1.Hadron.$Properties): SpinParity {
  return { twoJ: hadron.twoJ ?? 0, parity: hadron.parity === -1 ? -1 : 1 };
}
