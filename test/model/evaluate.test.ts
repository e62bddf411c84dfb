import { describe, expect, test } from "vitest";
import { Evaluation, evaluator } from "../../src/model/evaluate.js";
import { fittedObservables } from "../../src/model/fit-model.js";
import type { Model } from "../../src/model/model.js";
import { resolveStudy } from "../../src/model/resolve-study.js";
import { readStudy } from "../../src/study/read-study.js";
import { studyText } from "../chain/run.js";

const resolved = (text: string): Model => resolveStudy(readStudy(Buffer.from(text), "study.yaml"));

/** Models with mixing, with nuisance masses, and with breaking in the fit. */
const MODELS = {
  "octet and singlet mixed": resolved(studyText("octet-3-2")),
  "octet with breaking in the fit": resolved(
    studyText("octet-3-2-alone").replace("measurements:", "fit: { theoryError: 0.2 }\nmeasurements:"),
  ),
  "octet and singlet mixed, with breaking in the fit": resolved(
    studyText("octet-3-2").replace("measurements:", "fit: { theoryError: 0.2 }\nmeasurements:"),
  ),
  decuplet: resolved(studyText("decuplet")),
  "octet with amplitudes and a residue": resolved(
    `${studyText("octet-3-2-alone")}
  - { amplitude: [Lambda(1690) -> N Kbar, Lambda(1690) -> Sigma pi], value: -0.3 +- 0.05, source: invented }
  - { amplitude: [Sigma(1670) -> N Kbar, Sigma(1670) -> Lambda pi], value: 0.1 +- 0.05, sign: "+", source: invented }
  - { residue: [N(1520) -> N pi, N(1520) -> N eta], value: 1 +- 0.5 MeV, source: invented }
`,
  ),
};

/** A point where no parameter is at a special value. */
function point(model: Model): number[] {
  return model.parameters.map(({ start, kind }, k) =>
    kind === "mass" || kind === "total width" ? start * (1 + 0.002 * (k + 1)) : 0.7 * Math.cos(3 * k + 1),
  );
}

describe.each(Object.entries(MODELS))("%s", (_, model) => {
  const ready = evaluator(model);
  const at = point(model);

  test("every width is the identical factor times the sum of A^2 K, with A from its own row", () => {
    const evaluation = new Evaluation(ready, at);
    for (const [c, channel] of model.channels.entries()) {
      const sum = channel.waves.reduce((total, { breaking }, w) => {
        const row = evaluation.amplitudeRow(c, w);
        const plain = row.reduce((value, entry, k) => value + entry * at[k]!, 0);
        const z = breaking === undefined ? 0 : at[breaking]!;
        const broken = model.study.fit.theoryError * evaluation.couplingStrength(c, w).value * z;
        const amplitude = plain + channel.isospinCoefficient * broken;
        expect(Math.abs(evaluation.amplitude(c, w).value - amplitude)).toBeLessThan(
          1e-13 * (1 + Math.abs(amplitude)),
        );
        return total + channel.identicalFactor * amplitude ** 2 * evaluation.kinematicFactor(c, w);
      }, 0);
      expect(Math.abs(evaluation.width(c).value - sum)).toBeLessThan(1e-12 * (1 + sum));
    }
  });

  test("charge states share amplitudes: far fewer are computed than there are waves", () => {
    const waves = model.channels.reduce((count, channel) => count + channel.waves.length, 0);
    const isospin = new Set(model.channels.map(({ isospinChannel }) => isospinChannel)).size;
    expect(ready.shared.representatives.length).toBe(isospin);
    expect(waves).toBeGreaterThan(2 * isospin);
  });

  test("gradients of all observables and widths equal central differences", () => {
    const values = (parameters: readonly number[]) => {
      const evaluation = new Evaluation(ready, parameters);
      return [
        ...fittedObservables(model).map((observable) => evaluation.observable(observable)),
        ...model.channels.map((_, c) => evaluation.width(c)),
      ];
    };
    const here = values(at);
    for (const [k, value] of at.entries()) {
      const step = 1e-6 * Math.max(1, Math.abs(value));
      const [high, low] = [values(at.with(k, value + step)), values(at.with(k, value - step))];
      for (const [i, graded] of here.entries()) {
        const difference = (high[i]!.value - low[i]!.value) / (2 * step);
        const size = Math.abs(graded.value) / Math.max(1, Math.abs(value)) + Math.abs(difference);
        expect(Math.abs(graded.gradient[k]! - difference)).toBeLessThan(1e-7 * size + 1e-12);
      }
    }
  });
});

test("a mixed state has of each multiplet's coupling strength the part that it has of the multiplet", () => {
  const model = MODELS["octet and singlet mixed"];
  const angle = model.parameters.findIndex(({ kind }) => kind === "mixing angle");
  const [channel, wave] = [model.channels.findIndex(({ id }) => id.startsWith("Lambda(1520) -> p K-")), 0];
  const strength = (theta: number) => {
    const parameters = model.parameters.map(({ start, kind }, k) =>
      k === angle ? theta : kind === "coupling" ? 1 + k : start,
    );
    return new Evaluation(evaluator(model), parameters).couplingStrength(channel, wave).value;
  };
  const [bareOne, bareTwo] = [strength(0), strength(Math.PI / 2)];
  expect(Math.abs(bareOne - bareTwo)).toBeGreaterThan(0.1);
  expect(strength(0.4)).toBeCloseTo(Math.hypot(bareOne * Math.cos(0.4), bareTwo * Math.sin(0.4)), 12);
});
