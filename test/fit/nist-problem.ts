import { readFileSync } from "node:fs";
import { createRequire } from "node:module";
import { join } from "node:path";
import type { MathNode } from "mathjs";

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
  const model = mathjs.parse(formula);
  const names = [...rows.map((_, j) => `b${j + 1}`), ...variables];
  const value = compiled(model, names);
  const slopes = rows.map((_, j) => compiled(mathjs.derivative(model, `b${j + 1}`), names));
  const observed = compiled(mathjs.parse(response), ["y"]);
  const measured = data.map((row) => observed(row[0]!));
  const predictors = data.map((row) => row.slice(1));
  return {
    name,
    level: /(\w+) Level of Difficulty/.exec(text)![1] as NistProblem["level"],
    starts: [rows.map((row) => row[0]!), rows.map((row) => row[1]!)],
    certified: rows.map((row) => row[2]!),
    certifiedErrors: rows.map((row) => row[3]!),
    certifiedSquares: Number(/Residual Sum of Squares:\s+(\S+)/.exec(text)![1]),
    // Not by the degrees of freedom: Rat43.dat prints 9 for 15 observations and 4 parameters.
    certifiedResidualDeviation: Number(/Residual Standard Deviation:\s+(\S+)/.exec(text)![1]),
    residuals: (b) => measured.map((y, i) => value(...b, ...predictors[i]!) - y),
    jacobian: (b) => predictors.map((x) => slopes.map((slope) => slope(...b, ...x))),
  };
}

/**
 * An expression of mathjs as a plain function of the named numbers; mathjs evaluates a hundred times slower.
 *
 * Outside the domain of a power or a logarithm the value is NaN, as a fit expects.
 */
function compiled(node: MathNode, names: readonly string[]): (...values: number[]) => number {
  const text = node.toString({
    parenthesis: "all",
    handler: (part: MathNode, options: object) => {
      if (mathjs.isOperatorNode(part) && part.op === "^") {
        return `Math.pow(${part.args.map((argument) => argument.toString(options)).join(", ")})`;
      }
      if (mathjs.isFunctionNode(part)) {
        return `Math.${part.fn.name}(${part.args.map((argument) => argument.toString(options)).join(", ")})`;
      }
      if (mathjs.isSymbolNode(part) && part.name === "pi") return "Math.PI";
      return undefined;
    },
  });
  return new Function(...names, `return ${text};`) as (...values: number[]) => number;
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
