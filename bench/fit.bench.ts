import { loadavg } from "node:os";
import { join } from "node:path";
import { Matrix, QrDecomposition, SingularValueDecomposition } from "ml-matrix";
import { levenbergMarquardt } from "../src/fit/levenberg-marquardt.js";
import { normalNumbers } from "../src/fit/random-normal.js";
import { chiSquareProblem } from "../src/model/chi-square-problem.js";
import { evaluator } from "../src/model/evaluate.js";
import { type Fit, fittedObservables } from "../src/model/fit-model.js";
import { drawPseudoData, truthAt } from "../src/uncertainty/pseudo-data.js";
import { pseudoExperiments } from "../src/uncertainty/pseudo-experiments.js";
import { QUICK } from "../src/uncertainty/refit.js";
import { foldedFactor } from "../src/widths/folded-width.js";
import { requireResult } from "./bench-case.js";
import { timeText, warmUp } from "./measure.js";
import { deltaPi } from "./physics-cases.js";
import { tenObservables } from "./ten-observables.js";

/**
 * Cost of fits as ratios: `npx ts-node -T bench/fit.bench.ts`, after `npm run build` (the second thread is compiled).
 *
 * Times are processor times unless said otherwise, the least of several rounds.
 *
 * 1. A fit of ten observables against the bare linear solves it contains: one least-squares solution by ml-matrix for
 *    each linearised problem it solves, of a matrix of the same size. Goal: within 5 times.
 * 2. 1,000 pseudo-experiments against 1,000 fits of the same data from the same start. Goal: within 1.2 times on one
 *    core (processor time), 0.65 times on two (time by the clock, which needs two idle cores to mean anything). Warm as
 *    the fits are; the first call with two threads is told beside.
 * 3. The factor of a channel averaged over the line shape of an unstable daughter against the same factor at one mass,
 *    and against as many plain factors as the average takes.
 */
async function main(): Promise<void> {
  console.log(`Node ${process.version}, load ${loadavg()[0]!.toFixed(1)}`);
  const fit = tenObservables();
  againstLinearSolves(fit);
  againstPlainWidth();
  await againstFits(fit);
}

function againstPlainWidth(): void {
  const channel = deltaPi();
  const [delta, pionMeV] = channel.daughters;
  const { evaluations } = foldedFactor(channel, 1515);
  const folded = () => foldedFactor(channel, 1515);
  const plain = () => {
    let sum = 0;
    for (let k = 0; k < 1000; k++)
      sum += channel.model.kinematicFactorMeV(1515, delta.massMeV, pionMeV, channel.vertex);
    return sum;
  };
  for (const each of [folded, plain]) warmUp(each, 0.5);
  const rounds = Array.from({ length: 8 }, () => [processorSeconds(folded), processorSeconds(plain) / 1000]);
  const [one, factor] = [0, 1].map((k) => Math.min(...rounds.map((round) => round[k]!)));
  console.log(
    `widths/folded-factor/Delta-pi ${timeText(one!)} for ${evaluations} masses; ${(one! / factor!).toFixed(0)} times a plain width ` +
      `(${timeText(factor!)}), ${(one! / factor! / evaluations).toFixed(1)} times as many of them`,
  );
}

function againstLinearSolves(fit: Fit): void {
  const { model, minima } = fit;
  const best = minima[0]!;
  const problem = chiSquareProblem(evaluator(model), fittedObservables(model));
  const start = best.vector.map((value, k) => (k < model.couplingCount ? 1.3 * value : value));
  const run = () => levenbergMarquardt(problem, start, { initialRadius: 0.1 });
  const { chi2, verdicts } = run();
  requireResult("fit/ten-observables", Math.abs(chi2 - best.chi2) < 1e-9 * chi2, `chi2 ${chi2}`);
  const jacobian = problem.jacobian([...best.vector]);
  const right = Matrix.columnVector(problem.residuals([...best.vector]));
  const qr = () => new QrDecomposition(new Matrix(jacobian)).solve(right);
  const svd = () =>
    new SingularValueDecomposition(new Matrix(jacobian), { autoTranspose: true }).solve(right);
  for (const each of [run, qr, svd]) warmUp(each, 0.5);
  const rounds = Array.from({ length: 8 }, () => [run, qr, svd].map(processorSeconds));
  const [fitted, oneQr, oneSvd] = [0, 1, 2].map((k) => Math.min(...rounds.map((round) => round[k]!)));
  const [solvedQr, solvedSvd] = [oneQr! * verdicts.linearSolves, oneSvd! * verdicts.linearSolves];
  console.log(
    `fit/ten-observables           ${timeText(fitted!)}, ${verdicts.linearSolves} linear solves of ${jacobian.length} x ${jacobian[0]!.length}; ` +
      `${(fitted! / solvedQr).toFixed(2)} times the solves by QR (${timeText(solvedQr)}), ` +
      `${(fitted! / solvedSvd).toFixed(2)} times those by singular values (${timeText(solvedSvd)}); goal 5`,
  );
}

/** Processor time of one call, from calls for a tenth of a second: other programs add little to it. */
function processorSeconds(run: () => unknown): number {
  const start = process.cpuUsage();
  for (let calls = 1; ; calls++) {
    run();
    const { user, system } = process.cpuUsage(start);
    if (user + system > 1e5) return (user + system) / 1e6 / calls;
  }
}

const COUNT = 1000;
const ROUNDS = 4;

async function againstFits(fit: Fit): Promise<void> {
  const threadFile = join(__dirname, "..", "dist", "uncertainty", "refit-thread.js");
  const toys = (workers: number) => pseudoExperiments(fit, { count: COUNT, seed: 1, workers, threadFile });
  await toys(1);
  const { clock: first } = await timed(() => toys(2));
  const rounds: Record<"fits" | "one" | "two", { processor: number; clock: number }>[] = [];
  for (let round = 0; round < ROUNDS; round++) {
    rounds.push({
      fits: await timed(() => bareFits(fit)),
      one: await timed(() => toys(1)),
      two: await timed(() => toys(2)),
    });
  }
  const least = (of: (round: (typeof rounds)[number]) => number) => Math.min(...rounds.map(of));
  const fits = least(({ fits }) => fits.processor);
  const one = least(({ one }) => one.processor);
  console.log(
    `fit/1000-pseudo-experiments   ${timeText(one)} of one processor, ${(one / fits).toFixed(2)} times 1000 fits (${timeText(fits)}); goal 1.2`,
  );
  const clock = [least(({ fits }) => fits.clock), least(({ two }) => two.clock)] as const;
  console.log(
    `  with two threads            ${timeText(clock[1])} by the clock, ${(clock[1] / clock[0]).toFixed(2)} times 1000 fits in one (${timeText(clock[0])}); goal 0.65; ` +
      `${timeText(first)} in the first call, which compiles for the new thread`,
  );
}

/** The fits of the same pseudo-data, and nothing else. */
function bareFits(fit: Fit): void {
  const ready = evaluator(fit.model);
  const { vector } = fit.minima[0]!;
  const truth = truthAt(ready, fittedObservables(fit.model), vector);
  for (let index = 0; index < COUNT; index++) {
    const { observables, parameters } = drawPseudoData(truth, normalNumbers(1, index));
    const drawn = { ...ready, model: { ...fit.model, parameters } };
    levenbergMarquardt(chiSquareProblem(drawn, observables), vector, QUICK);
  }
}

async function timed(run: () => unknown): Promise<{ processor: number; clock: number }> {
  const [processor, clock] = [process.cpuUsage(), performance.now()];
  await run();
  const { user, system } = process.cpuUsage(processor);
  return { processor: (user + system) / 1e6, clock: (performance.now() - clock) / 1e3 };
}

void main();
