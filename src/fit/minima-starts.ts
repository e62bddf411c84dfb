import { Matrix, SingularValueDecomposition } from "ml-matrix";
import { LimitError } from "../errors.js";
import { type CouplingBlock, couplingBlocks, flipBlock } from "./coupling-blocks.js";
import { checkMinimaProblem, type MinimaProblem } from "./minima-problem.js";
import { signCellBound, signCells } from "./sign-cells.js";

type Vector = readonly number[];

/** Starts for a search of minima, and the blocks whose overall sign chi-square does not feel. */
export interface MinimaStarts {
  readonly blocks: readonly CouplingBlock[];
  readonly starts: MinimaStart[];
}

/** A full parameter vector: couplings, then the nuisance starts. */
export interface MinimaStart {
  readonly parameters: Vector;
  /** The solution of linear least squares (perhaps outside its cell), deep inside a cell, or inside beside a wall. */
  readonly kind: "linear" | "deep" | "wall";
}

/**
 * Starts in every cell of sign patterns, the product over blocks of couplings; one cell of each pair +-.
 *
 * In each cell: the linear least-squares solution for amplitudes with its signs, a point deep inside, and one beside
 * each wall, because chi-square is not convex where an amplitude is much smaller than measured.
 * A block whose overall sign chi-square does feel (a prior away from 0, bounds on one side) gets both signs.
 * @param maximumStarts - the most that will be made
 * @throws LimitError before the work begins, if there could be more
 * @throws InputError if forms or targets do not fit the problem
 */
export function minimaStarts(problem: MinimaProblem, maximumStarts: number): MinimaStarts {
  checkMinimaProblem(problem);
  const blocks = couplingBlocks(problem.forms, problem.couplingCount);
  const bounds = blocks.map((block) =>
    Math.max(1, signCellBound(blockForms(problem, block), block.couplings.length)),
  );
  const estimate = (2 + problem.forms.length) * bounds.reduce((product, count) => product * count, 1);
  refuseTooMany(problem, estimate, maximumStarts);
  const nowhere = [...new Array<number>(problem.couplingCount).fill(0), ...problem.nuisanceStarts];
  let combinations: Combination[] = [{ near: nowhere, inside: [nowhere] }];
  for (const block of blocks) {
    const points = blockPoints(problem, block);
    combinations = combinations.flatMap((rest) => points.map((point) => combined(rest, block, point)));
  }
  const list: MinimaStart[] = combinations.flatMap(({ near, inside }) => [
    { parameters: near, kind: "linear" },
    ...inside.map((parameters, k) => ({ parameters, kind: k === 0 ? ("deep" as const) : ("wall" as const) })),
  ]);
  const felt = blocks.filter((block) => feelsSign(problem, block, list));
  const turned = (start: MinimaStart, block: CouplingBlock) => ({
    ...start,
    parameters: flipBlock(start.parameters, block),
  });
  refuseTooMany(problem, list.length * 2 ** felt.length, maximumStarts);
  const starts = felt.reduce((all, block) => all.flatMap((start) => [start, turned(start, block)]), list);
  return { blocks, starts };
}

function refuseTooMany(problem: MinimaProblem, count: number, maximumStarts: number): void {
  if (count <= maximumStarts) return;
  throw new LimitError(
    `findMinima: ${problem.couplingCount} couplings with ${problem.forms.length} forms need up to ${count} starts, ` +
      `more than the limit of ${maximumStarts}. Fix or leave out couplings, or raise the limit maximumStarts.`,
  );
}

/** Starts in one cell: that of linear least squares, and those inside, the deep one first. */
interface Combination {
  readonly near: Vector;
  readonly inside: readonly Vector[];
}

/** The starts of other blocks with those of one more: beside a wall in one block, deep in the others. */
function combined(rest: Combination, block: CouplingBlock, point: Combination): Combination {
  const put = (full: Vector, values: Vector) =>
    full.map((old, j) => values[block.couplings.indexOf(j)] ?? old);
  const [deep, ...walls] = point.inside;
  return {
    near: put(rest.near, point.near),
    inside: [
      ...rest.inside.map((full) => put(full, deep!)),
      ...walls.map((wall) => put(rest.inside[0]!, wall)),
    ],
  };
}

/** The starts of one block in each of its cells. */
function blockPoints(problem: MinimaProblem, block: CouplingBlock): Combination[] {
  const forms = blockForms(problem, block);
  const directions = signCells(forms, block.couplings.length);
  const ones = block.couplings.map(() => 1);
  if (directions.length === 0) return [{ near: ones, inside: [ones] }];
  const targets = problem.amplitudeTargets
    .filter((target) => block.forms.includes(target.form))
    .map((target) => ({ ...target, form: forms[block.forms.indexOf(target.form)]! }));
  return directions.map((direction) => {
    const deep = scaledToTargets(direction, targets);
    return {
      near: nearTargets(deep, targets),
      inside: [deep, ...forms.map((form) => besideWall(deep, form, forms))],
    };
  });
}

/** The point moved towards one wall of its cell, nine tenths of the way to the first wall met. */
function besideWall(point: Vector, wall: Vector, forms: readonly Vector[]): number[] {
  const inward = Math.sign(dot(wall, point));
  const step = wall.map((value) => -inward * value);
  const reaches = forms.map((form) => -dot(form, point) / dot(form, step)).filter((reach) => reach > 0);
  return point.map((value, j) => value + 0.9 * Math.min(...reaches) * step[j]!);
}

interface BlockTarget {
  readonly form: Vector;
  readonly amplitude: number;
  readonly sigma: number;
}

/** A direction with the length that suits the amplitude targets best; as it is where there are none. */
function scaledToTargets(direction: Vector, targets: readonly BlockTarget[]): number[] {
  let [product, square] = [0, 0];
  for (const { form, amplitude, sigma } of targets) {
    const size = Math.abs(dot(form, direction)) / sigma;
    product += (size * amplitude) / sigma;
    square += size * size;
  }
  const length = product > 0 ? product / square : 1;
  return direction.map((value) => value * length);
}

/** The linear least-squares solution for the amplitudes with the signs they have at a point; the one nearest to it. */
function nearTargets(point: Vector, targets: readonly BlockTarget[]): number[] {
  if (targets.length === 0) return [...point];
  const rows = Math.max(targets.length, point.length);
  const matrix = Matrix.zeros(rows, point.length);
  const missing = Matrix.zeros(rows, 1);
  for (const [i, { form, amplitude, sigma }] of targets.entries()) {
    const now = dot(form, point);
    matrix.setRow(
      i,
      form.map((value) => value / sigma),
    );
    missing.set(i, 0, (Math.sign(now) * amplitude - now) / sigma);
  }
  const correction = new SingularValueDecomposition(matrix).solve(missing);
  return point.map((value, j) => value + correction.get(j, 0));
}

/** Whether chi-square changes when a block's overall sign does, or bounds forbid one of the signs. */
function feelsSign(problem: MinimaProblem, block: CouplingBlock, starts: readonly MinimaStart[]): boolean {
  const lopsided = block.couplings.some(
    (j) => problem.bounds && problem.bounds[j]!.lower !== -problem.bounds[j]!.upper,
  );
  if (lopsided) return true;
  return starts.slice(0, 3).some(({ parameters }) => {
    const [here, there] = [
      chiSquared(problem, parameters),
      chiSquared(problem, flipBlock(parameters, block)),
    ];
    return Math.abs(here - there) > 1e-9 * (1 + Math.abs(here));
  });
}

function chiSquared(problem: MinimaProblem, parameters: Vector): number {
  return problem.residuals(parameters).reduce((sum, value) => sum + value * value, 0);
}

function blockForms(problem: MinimaProblem, block: CouplingBlock): number[][] {
  return block.forms.map((k) => block.couplings.map((j) => problem.forms[k]![j]!));
}

function dot(a: Vector, b: Vector): number {
  return a.reduce((sum, value, j) => sum + value * b[j]!, 0);
}
