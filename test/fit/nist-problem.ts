import { readFileSync } from "node:fs";
import { createRequire } from "node:module";
import { join } from "node:path";

const mathjs = createRequire(__filename)("mathjs/lib/browser/math.js") as typeof import("mathjs");

/** One certified problem: its data as residuals, with derivatives made from the printed formula by mathjs. */
export interface NistProblem {
  readonly name: string;
  readonly level: "Lower" | "Average" | "Higher";
  readonly starts: readonly [number[], number[]];
  readonly certified: number[];
  readonly certifiedErrors: number[];
  readonly certifiedSquares: number;
  readonly certifiedResidualDeviation: number;
  residuals(parameters: readonly number[]): number[];
  jacobian(parameters: readonly number[]): number[][];
}

/** Reads a NIST StRD file: formula, two starts, certified values and data all come from its text. */
export function readNistProblem(name: string): NistProblem {
  const text = readFileSync(join(__dirname, "nist-strd", `${name}.dat`), "latin1");
  const rows = [...text.matchAll(/^\s*b\d+ =\s+(\S+)\s+(\S+)\s+(\S+)\s+(\S+)\s*$/gm)].map((m) =>
    m.slice(1).map(Number),
  );
  const [, first, last] = /Data\s+\(lines (\d+) to (\d+)\)/.exec(text)!;
  const data = text
    .split(/\r?\n/)
    .slice(Number(first) - 1, Number(last))
    .map((line) => line.trim().split(/\s+/).map(Number));
  const { response, formula } = readFormula(text);
  const variables = data[0]!.length === 2 ? ["x"] : ["x1", "x2"];
  const compiled = mathjs.parse(formula);
  const value = compiled.compile();
  const slopes = rows.map((_, j) => mathjs.derivative(compiled, `b${j + 1}`).compile());
  const observed = mathjs.parse(response).compile();
  const scopes = data.map((row) =>
    Object.fromEntries(variables.map((variable, k) => [variable, row[k + 1]!])),
  );
  const scope = (parameters: readonly number[], i: number) => {
    parameters.forEach((b, j) => {
      scopes[i]![`b${j + 1}`] = b;
    });
    return scopes[i]!;
  };
  const measured = data.map((row) => observed.evaluate({ y: row[0] }) as number);
  // Outside the domain of a power or a logarithm mathjs answers with a complex number: not finite, for a fit.
  const real = (result: unknown) => (typeof result === "number" ? result : Number.NaN);
  return {
    name,
    level: /(\w+) Level of Difficulty/.exec(text)![1] as NistProblem["level"],
    starts: [rows.map((row) => row[0]!), rows.map((row) => row[1]!)],
    certified: rows.map((row) => row[2]!),
    certifiedErrors: rows.map((row) => row[3]!),
    certifiedSquares: Number(/Residual Sum of Squares:\s+(\S+)/.exec(text)![1]),
    // Not by the degrees of freedom: Rat43.dat prints 9 for 15 observations and 4 parameters.
    certifiedResidualDeviation: Number(/Residual Standard Deviation:\s+(\S+)/.exec(text)![1]),
    residuals: (parameters) => measured.map((y, i) => real(value.evaluate(scope(parameters, i))) - y),
    jacobian: (parameters) =>
      measured.map((_, i) => slopes.map((slope) => real(slope.evaluate(scope(parameters, i))))),
  };
}

/** Left and right side of the printed model, rewritten for mathjs. */
function readFormula(text: string): { response: string; formula: string } {
  const model = /Parameters \(b1.*?\)\s*\n([\s\S]*?)\+\s*e\s*\n/.exec(text.replace(/\r/g, ""))![1]!;
  const [left, right] = model
    .replace(/^\s*pi = .*$/m, "")
    .replaceAll("[", "(")
    .replaceAll("]", ")")
    .replaceAll("**", "^")
    .replaceAll("arctan", "atan")
    .replace(/\s+/g, " ")
    .split("=");
  return { response: left!.trim(), formula: right!.trim() };
}
