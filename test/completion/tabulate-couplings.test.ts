import { describe, expect, test } from "vitest";
import type { Coupling, CouplingTable } from "../../src/completion/coupling-table.js";
import { couplingTable } from "../../src/completion/tabulate-couplings.js";
import { formatRoot, rootToNumber } from "../../src/exact/signed-root.js";
import { Evaluation, evaluator } from "../../src/model/evaluate.js";
import { DECUPLET, fitOf, MIXED_OCTET, TWENTY_SEVEN, VECTORS } from "./coupling-studies.js";

const mixed = couplingTable(fitOf(MIXED_OCTET), 0);
const vectors = couplingTable(fitOf(VECTORS), 0);
const exotic = couplingTable(fitOf(TWENTY_SEVEN), 0);
const ALL = { mixed, vectors, exotic };

/** The amplitude again from the row alone: weights, exact coefficients and the table's reduced couplings. */
function fromRow({ components }: Coupling, { reduced }: CouplingTable, phases: "group" | "matrix"): number {
  return components.reduce(
    (sum, { decay, weight, terms }) =>
      terms.reduce((part, term) => {
        const g = reduced.find((value) => value.decay === decay && value.reduced === term.reduced)!;
        return part + weight * rootToNumber(term[phases]!) * g.value.value;
      }, sum),
    0,
  );
}

const row = (table: CouplingTable, id: string) =>
  [...table.isospin, ...table.charged].find((candidate) => candidate.id === id)!;

describe("coupling tables", () => {
  test.each(Object.entries(ALL))("every value of %s follows from its row alone", (_, table) => {
    for (const entry of [...table.isospin, ...table.charged]) {
      expect(entry.value.value, entry.id).toBeCloseTo(fromRow(entry, table, "group"), 12);
      if (entry.matrixValue === null) continue;
      expect(entry.matrixValue.value, entry.id).toBeCloseTo(fromRow(entry, table, "matrix"), 12);
      expect(entry.matrixValue.plus).toBe(entry.value.plus);
    }
  });

  test.each(Object.entries(ALL))("the squares of %s give the model's widths", (_, table) => {
    const { model, minima } = table.fit;
    const evaluation = new Evaluation(evaluator(model), minima[0]!.vector);
    for (const [index, channel] of model.channels.entries()) {
      const waves = table.charged.filter(({ channel: at }) => at === index);
      const width = waves.reduce(
        (sum, { value, wave }) => sum + value.value ** 2 * channel.waves[wave]!.kinematicFactor,
        0,
      );
      expect(channel.identicalFactor * width, channel.id).toBeCloseTo(evaluation.width(index).value, 9);
    }
  });

  test.each(Object.entries(ALL))(
    "squares by isospin are the sums over the charge states of %s",
    (_, table) => {
      const { channels } = table.fit.model;
      for (const { id, channel, wave, value } of table.isospin) {
        const { isospinChannel, parent } = channels[channel]!;
        const sum = table.charged
          .filter((entry) => {
            const other = channels[entry.channel]!;
            return entry.wave === wave && other.isospinChannel === isospinChannel && other.parent === parent;
          })
          .reduce(
            (total, entry) => total + channels[entry.channel]!.identicalFactor * entry.value.value ** 2,
            0,
          );
        // Both orders of two pions are one charge channel, so that they count half.
        const [, first, second] = /-> (\S+) (\S+)$/.exec(id)!;
        expect(sum, id).toBeCloseTo(value.value ** 2 * (first === second ? 0.5 : 1), 10);
      }
    },
  );

  test("errors are those of the fit's covariance, by finite differences of the values", () => {
    const { fit } = mixed;
    const { covariance, vector } = fit.minima[0]!;
    const at = (k: number, by: number) => {
      const moved = vector.map((v, j) => (j === k ? v + by : v));
      const minima = [{ ...fit.minima[0]!, vector: moved }];
      return couplingTable({ ...fit, minima }, 0).charged;
    };
    const h = 1e-5;
    const slopes = vector.map((_, k) => {
      const [up, down] = [at(k, h), at(k, -h)];
      return up.map(({ value }, i) => (value.value - down[i]!.value.value) / (2 * h));
    });
    for (const [i, { value, id }] of mixed.charged.entries()) {
      const variance = slopes.reduce(
        (sum, a, j) => sum + slopes.reduce((part, b, k) => part + a[i]! * covariance[j]![k]! * b[i]!, 0),
        0,
      );
      expect(value.plus / Math.sqrt(variance), id).toBeCloseTo(1, 6);
      expect(value.minus).toBe(value.plus);
    }
  });

  test("octets stand in D and F, in either phases; the singlet does not", () => {
    const proton = row(mixed, "N(1577)+ -> n pi+").components[0]!;
    expect(Object.values(proton.fAndD!.group).map(formatRoot)).toEqual(["-sqrt(2)", "-sqrt(2)"]);
    expect(Object.values(proton.fAndD!.matrix!).map(formatRoot)).toEqual(["sqrt(2)", "sqrt(2)"]);
    const eta = row(mixed, "N(1577)+ -> p eta").components;
    expect(eta.map(({ weight }) => weight.toFixed(6))).toEqual([
      Math.cos(0.26).toFixed(6),
      Math.sin(0.26).toFixed(6),
    ]);
    expect(eta.map(({ fAndD }) => fAndD !== null)).toEqual([true, false]);
  });

  test("two daughters from one multiplet carry sqrt(2) exactly", () => {
    const [component, ...others] = row(vectors, "rho(770)+ -> pi+ pi0").components;
    expect(others).toEqual([]);
    expect(component!.terms.map(({ group }) => formatRoot(group))).toEqual(["sqrt(2/3)"]);
    expect(component!.weight).toBe(1);
  });

  test("an exact zero is a row without terms", () => {
    const zero = row(couplingTable(fitOf(DECUPLET), 0), "Sigma(1940)+ -> Sigma(1385)+ eta");
    expect(zero.components[0]!.terms).toEqual([]);
    expect(zero.value.value).toBe(0);
    expect(zero.matrixValue!.value).toBe(0);
  });

  test("a 27 has no phases of matrices and no isospin Lagrangian", () => {
    expect(exotic.charged.map(({ matrixValue }) => matrixValue)).toEqual([null, null, null, null]);
    expect(exotic.constants).toEqual([]);
  });

  test("isospin rows of baryon octets name their constant, and have its value up to their normalisation", () => {
    const [{ constants }] = mixed.constants as [(typeof mixed.constants)[number]];
    expect(constants).toHaveLength(12);
    const factors: Record<string, number> = {
      "N(1577) -> N pi": Math.sqrt(3),
      "N(1577) -> Lambda K": 1,
      "Sigma(1731) -> N Kbar": -Math.SQRT2,
      "Lambda(1718) -> Sigma pi": -Math.sqrt(3),
    };
    for (const [id, factor] of Object.entries(factors)) {
      const entry = row(mixed, id);
      const constant = constants.find(({ name }) => name === entry.constant)!;
      expect(entry.value.value, id).toBeCloseTo(factor * constant.value.value, 12);
      expect(entry.value.plus, id).toBeCloseTo(Math.abs(factor) * constant.value.plus, 12);
    }
    expect(row(mixed, "N(1577) -> N eta").constant).toBeNull();
  });
});
