import { join } from "node:path";
import { describe, expect, test } from "vitest";
import { pseudoExperiments } from "../../src/uncertainty/pseudo-experiments.js";
import { studyText } from "../chain/run.js";
import { fitOf } from "./planted.js";

const threadFile = join(__dirname, "..", "..", "dist", "uncertainty", "refit-thread.js");
const octet = fitOf(studyText("octet-5-2"));
const decuplet = fitOf(studyText("decuplet"));

/** Four standard deviations of a part p of n experiments: a false alarm in 16000. */
const fourSigma = (p: number, n: number) => 4 * Math.sqrt((p * (1 - p)) / n);

describe("pseudo-experiments", () => {
  test("scatter by the errors of the fit: median, quantiles and coverage of 1500 (seed 1; false alarm 1 in 800 together)", async () => {
    const count = 1500;
    const { quantities, unconverged } = await pseudoExperiments(octet, { count, seed: 1 });
    expect(unconverged).toBe(0);
    for (const { name, error, value } of octet.minima[0]!.parameters) {
      const { truth, quantiles, coverage } = quantities.find((quantity) => quantity.name === name)!;
      const [low, median, high] = quantiles;
      expect(truth).toBeCloseTo(value, 9);
      // The error of a median is sqrt(pi/2) that of the mean; half the distance of the quantiles is 0.994 sigma. The
      // curvature of widths in the couplings adds a few per cent.
      expect(Math.abs(median - value) / error).toBeLessThan(4 * Math.sqrt(Math.PI / 2 / count) + 0.05);
      expect(Math.abs((high - low) / (2 * 0.994 * error) - 1)).toBeLessThan(0.1);
      expect(Math.abs(coverage - 0.683)).toBeLessThan(fourSigma(0.683, count) + 0.02);
    }
  });

  test("have the chi-square of their degrees of freedom (seed 2; false alarm 1 in 16000)", async () => {
    const count = 2000;
    const { probability } = await pseudoExperiments(decuplet, { count, seed: 2 });
    const expected = decuplet.minima[0]!.probability!;
    expect(Math.abs(probability - expected)).toBeLessThan(fourSigma(expected, count));
  });

  test("are the same with one thread, with two and with three", async () => {
    const one = await pseudoExperiments(octet, { count: 60, seed: 11 });
    for (const workers of [2, 3])
      expect(await pseudoExperiments(octet, { count: 60, seed: 11, workers, threadFile })).toEqual(one);
    expect(await pseudoExperiments(octet, { count: 60, seed: 12 })).not.toEqual(one);
  });

  test("report progress up to the end", async () => {
    const seen: number[] = [];
    const onProgress = (done: number, total: number) => seen.push(done / total);
    await pseudoExperiments(decuplet, { count: 30, seed: 1, onProgress });
    expect(seen.at(-1)).toBe(1);
    expect([...seen].sort((a, b) => a - b)).toEqual(seen);
  });

  test("stop in the middle with the reason of the signal, other threads too", async () => {
    const controller = new AbortController();
    const reason = new Error("stopped by the test");
    const onProgress = () => controller.abort(reason);
    const run = pseudoExperiments(octet, {
      count: 1_000_000,
      seed: 1,
      workers: 2,
      threadFile,
      signal: controller.signal,
      onProgress,
    });
    await expect(run).rejects.toBe(reason);
  });

  test("record on which branch each ends: both where a loose third width tells two minima apart, one where it is tight (seed 3)", async () => {
    const lines = studyText("octet-5-2")
      .split("\n")
      .filter(
        (line) => !line.includes("source") || /N\(1675\)|Lambda pi|Sigma\(1775\) -> Sigma pi/.test(line),
      );
    const loose = fitOf(lines.join("\n").replace("4.2 +- 1.8", "4.2 +- 200"));
    const [first, second] = (await pseudoExperiments(loose, { count: 200, seed: 3 })).branches;
    expect(first! + second!).toBe(200);
    expect(Math.min(first!, second!)).toBeGreaterThan(40);
    const tight = fitOf(lines.join("\n"));
    expect((await pseudoExperiments(tight, { count: 50, seed: 3 })).branches[0]).toBe(50);
  });

  test.each([
    { options: { count: 0, seed: 1 }, message: "pseudoExperiments: count: expected an integer >= 1, got 0." },
    {
      options: { count: 1, seed: -1 },
      message: "pseudoExperiments: seed: expected an integer from 0 to 4294967295, got -1.",
    },
    {
      options: { count: 1, seed: 1, workers: 0 },
      message: "pseudoExperiments: workers: expected an integer from 1 to 256, got 0.",
    },
    {
      options: { count: 100_000_000, seed: 1 },
      message:
        "pseudoExperiments: 100000000 experiments with 5 quantities are more than fit into memory. Ask for at most 10324440.",
    },
  ])("refuse $options", async ({ options, message }) => {
    await expect(pseudoExperiments(decuplet, options)).rejects.toThrow(message);
  });
});
