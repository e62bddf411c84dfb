import { EigenvalueDecomposition, Matrix } from "ml-matrix";
import { describe, expect, test } from "vitest";
import { fitModel } from "../../src/model/fit-model.js";
import { mixingMatrix } from "../../src/model/mixing-matrix.js";
import type { Model, Rotation } from "../../src/model/model.js";
import { resolveStudy } from "../../src/model/resolve-study.js";
import { studyWarnings } from "../../src/model/validity.js";
import { readStudy } from "../../src/study/read-study.js";
import { planted, resolved, TIED } from "./mixing-cases.js";

/** Masses and eigenvectors of a mass matrix in MeV with bare masses a and b, the lighter state first. */
function diagonal(a: number, b: number, element: number) {
  const matrix = new Matrix([
    [a, element],
    [element, b],
  ]);
  const { realEigenvalues, eigenvectorMatrix } = new EigenvalueDecomposition(matrix, {
    assumeSymmetric: true,
  });
  return [0, 1].map((k) => ({ massMeV: realEigenvalues[k]!, vector: eigenvectorMatrix.getColumn(k) }));
}

/** A study of two pairs, the second tied to the first, at the masses of two mass matrices. */
function study(
  irrep: string,
  first: string,
  second: string,
  pairs: ReturnType<typeof diagonal>[],
  angle: string,
) {
  const group = (place: string, states: ReturnType<typeof diagonal>, written: string) =>
    `  - bare: [o/${place}, b/${place}]
    states: [${states.map(({ massMeV }, k) => `{ name: ${place}_${k}, mass: ${massMeV} MeV, width: 100 MeV }`).join(", ")}]
    angle: ${written}\n`;
  const text = `couplet: 1
title: Tied pairs, invented
multiplets:
  o: { irrep: 8, spinParity: 3/2-, members: [] }
  b: { irrep: ${irrep}, spinParity: 3/2-, members: [] }
mixing:
${group(first, pairs[0]!, angle)}${group(second, pairs[1]!, `tied to ${first}_0`)}decays:
  - { name: o, from: o, to: [baryon-octet, pseudoscalar-octet], L: 2, model: a }
  - { name: b, from: b, to: [baryon-octet, pseudoscalar-octet], L: 2, model: a }
measurements: [{ width: ${first}_0 -> ${first === "Lambda" ? "Sigma" : first} pi, value: 20 +- 2 MeV, source: invented }]
`;
  return resolveStudy(readStudy(Buffer.from(text), "study.yaml"));
}

const written = (vector: readonly number[]) => `${Math.atan2(vector[1]!, vector[0]!)} rad`;
const upToSign = (row: readonly number[]) => row.map((value) => value * Math.sign(row[0]!));

describe("one element of the mass matrix rules two pairs", () => {
  // First-order breaking is the eta8 of an octet, whose isoscalar factors are equal for Sigma and Xi of the decuplet, for N and Sigma of the antidecuplet.
  test.each([
    ["10", "Sigma", "Xi", [1780, 1870], [1930, 2080], 60],
    ["10", "Xi", "Sigma", [1930, 2080], [1870, 1780], -35],
    ["10bar", "N", "Sigma", [1650, 1700], [1790, 1900], 44],
  ] as const)("8 and %s: %s and %s", (irrep, first, second, [a, b], [c, d], element) => {
    const leader = diagonal(a, b, element);
    // The first state of each pair is mainly of the same bare one.
    const follower = c < d ? diagonal(c, d, element) : diagonal(c, d, element).reverse();
    const model = study(irrep, first, second, [leader, follower], written(leader[0]!.vector));
    const found = mixingMatrix(model.mixing[1]!, []).value;
    for (const [k, { vector }] of follower.entries()) {
      const wanted = upToSign(vector);
      // Not the signs of the states, which are free; the bare ones have theirs in common with the first pair.
      for (const [j, value] of upToSign(found[k]!).entries()) expect(value).toBeCloseTo(wanted[j]!, 12);
    }
  });

  test("8 and 27: N and Lambda go like their isoscalar factors, root 9/20 and root 27/40", () => {
    // Signed squares of 27 in 8 x 8, computed from generators: src/published/couplet-isoscalar-27-from-8x8.json.
    const n = diagonal(1650, 1720, 40);
    const lambda = diagonal(1780, 1840, 40 * Math.sqrt(27 / 40 / (9 / 20)));
    const model = study("27", "N", "Lambda", [n, lambda], written(n[0]!.vector));
    const [row] = mixingMatrix(model.mixing[1]!, []).value;
    expect(Math.abs(row![1]! / row![0]!)).toBeCloseTo(
      Math.abs(lambda[0]!.vector[1]! / lambda[0]!.vector[0]!),
      12,
    );
  });
});

test("the derivative of a tied rotation equals a finite difference, also where cos 2t < 0", () => {
  const rotation: Rotation = {
    first: 0,
    second: 1,
    angle: 0,
    sign: -1,
    offset: 0.3,
    parameter: 0,
    tiedBy: 0.8,
  };
  const mixing = { states: ["1", "2"], bare: ["a", "b"], rotations: [rotation] };
  for (const t of [0.2, 1.2, -1.4, 2.5]) {
    const h = 1e-6;
    const [derivative] = mixingMatrix(mixing, [t]).derivatives;
    const [up, down] = [t + h, t - h].map((x) => mixingMatrix(mixing, [x]).value);
    for (const i of [0, 1])
      for (const j of [0, 1])
        expect(derivative!.value[i]![j]).toBeCloseTo((up![i]![j]! - down![i]![j]!) / (2 * h), 8);
  }
});

test("a pair cannot mix more than its masses allow: sin 2t' stays at 1", () => {
  const rotation: Rotation = { first: 0, second: 1, angle: 0.6, sign: 1, offset: 0, tiedBy: 3 };
  const { value } = mixingMatrix({ states: ["1", "2"], bare: ["a", "b"], rotations: [rotation] }, []);
  expect(value[0]![0]).toBeCloseTo(Math.SQRT1_2, 12);
});

test("the warnings say what a tied angle is worth, and where it is impossible", () => {
  const warnings = (text: string) => studyWarnings(fitModel(resolved(text)), 0).join("\n");
  const text = planted(TIED);
  expect(warnings(text)).toContain("the mixing angle of Xi(1950) and Xi(2120) is that of another pair");
  const close = text.replace("mass: 2120 MeV", "mass: 1960 MeV");
  expect(warnings(close)).toContain(
    "Xi(1950) and Xi(2120) cannot mix as much as the pair their angle is tied to",
  );
});

test("the fit tells the angle that follows, with the error that comes with it", () => {
  const { model, minima } = fitModel(resolved(planted(TIED)));
  const { vector, covariance } = minima[0]!;
  const derived = minima[0]!.parameters;
  const tied = derived.find(({ name }) => name === "angle(Xi(1950), Xi(2120))")!;
  const index = model.parameters.findIndex(({ kind }) => kind === "mixing angle");
  const t = vector[index]!;
  const ratio = 150 / 170;
  expect(Math.sin(2 * tied.value)).toBeCloseTo(ratio * Math.sin(2 * t), 8);
  const error = Math.sqrt(covariance[index]![index]!);
  expect(tied.error).toBeCloseTo((Math.abs(ratio * Math.cos(2 * t)) / Math.cos(2 * tied.value)) * error, 8);
});

describe("refused", () => {
  const sigma = diagonal(1780, 1870, 60);
  const xi = diagonal(1930, 2080, 60);
  const failing = (change: (text: string) => string): (() => Model) => {
    return () => resolved(change(planted(TIED)));
  };
  test.each([
    [
      "a state that is in no pair above",
      "tied to Sigma(1901)",
      "tied to a state of a pair that stands above",
    ],
    ["one of its own states", "tied to Xi(1950)", "tied to a state of a pair that stands above"],
  ])("%s", (_, angle, message) => {
    expect(failing((text) => text.replace("tied to Sigma(1900)", angle))).toThrow(message);
  });
  test("pairs of other multiplets or in another order", () => {
    expect(failing((text) => text.replace("[o/Xi, d/Xi]", "[d/Xi, o/Xi]"))).toThrow(
      "tied to a pair of d and o in this order",
    );
  });
  test("two octets, whose mixing two numbers rule", () => {
    expect(() => study("8", "Sigma", "Xi", [sigma, xi], "free")).toThrow("8 once in 8x8");
  });
});
