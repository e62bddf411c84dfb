import { once } from "node:events";
import { formatRoot } from "../exact/signed-root.js";
import { refuse } from "../require.js";
import { type Irrep, irrepDimension, irrepName, isospinMultiplets, parseIrrep } from "../su3/irrep.js";
import type { IsoscalarTable } from "../su3/isoscalar-factors.js";
import { isoscalarTable } from "../su3/isoscalar-factors.js";
import {
  encodedPieces,
  factorPieces,
  type StateCoefficient,
  stateCoefficients,
} from "../tables/encode-factors.js";
import { jsonPieces } from "../tables/json-pieces.js";
import { sealedPieces } from "../tables/sealed-bytes.js";
import { writeWholePieces } from "../tables/whole-file.js";
import { copyName, fractionText, placeName, placeText } from "./labels.js";
import { requireOutputPlaces } from "./output-place.js";
import { announceUnfinished } from "./own-thread.js";
import { print } from "./print.js";
import { type Progress, type ProgressBar, progressBar } from "./progress.js";
import { textTable } from "./text-table.js";

/** What `couplet factors` was asked for. */
export interface FactorsOptions {
  readonly into?: string;
  readonly states?: true;
  readonly json?: true;
  readonly out?: string;
}

/** `couplet factors`: isoscalar factors of a product, for people, as JSON or into a file; never held as text. */
export async function runFactors(
  leftText: string,
  rightText: string,
  options: FactorsOptions,
): Promise<void> {
  const { json, out } = options;
  const states = options.states === true;
  if (out === "") refuse("couplet factors: --out", "the name of a file", out);
  if (out !== undefined) requireOutputPlaces([out]);
  const bar = progressBar("factors", out !== undefined && !json);
  try {
    const table = requestedTable(leftText, rightText, options, bar.report);
    if (out !== undefined) {
      const pieces = sealedPieces(counted(encodedPieces(table, { states }), table, bar));
      const length = writeWholePieces(out, pieces, announceUnfinished);
      bar.end();
      if (!json) print(`wrote ${out} (${length} bytes)\n`);
    }
    if (json) {
      await printPieces(
        counted(jsonPieces("couplet.v1.FactorTable", factorPieces(table, { states })), table, bar),
      );
    } else if (out === undefined) {
      bar.end();
      await printPieces(states ? describeStates(table) : describeFactors(table));
    }
  } finally {
    bar.end();
  }
}

function requestedTable(
  leftText: string,
  rightText: string,
  { into }: FactorsOptions,
  progress: Progress,
): IsoscalarTable {
  const [left, right] = [parseIrrep(leftText), parseIrrep(rightText)];
  return isoscalarTable(left, right, {
    ...(into === undefined ? {} : { into: parseIrrep(into) }),
    progress: (done, total) => progress(done, 2 * total),
  });
}

/** Pieces of a table, on the second half of the bar as they pass. */
function* counted<T>(pieces: Iterable<T>, table: IsoscalarTable, { report }: ProgressBar): Generator<T> {
  const total = Math.ceil(table.count / 2000) + 1;
  let done = 0;
  for (const piece of pieces) {
    yield piece;
    done++;
    report(total + Math.min(done, total), 2 * total);
  }
}

/** Writes text piece by piece, as fast as the reader takes it. */
async function printPieces(pieces: Iterable<string>): Promise<void> {
  for (const piece of pieces) if (!process.stdout.write(piece)) await once(process.stdout, "drain");
}

function heading(table: IsoscalarTable): string {
  const product = `${irrepName(table.left)} x ${irrepName(table.right)}`;
  const series = table.series.map(
    ({ irrep, multiplicity }) => (multiplicity > 1 ? `${multiplicity}*` : "") + irrepName(irrep),
  );
  return `${product} = ${series.join(" + ")}\nconvention ${table.convention}; copies by ${table.multiplicityRule}; first factor first\n`;
}

/** The heading, then one copy after another. */
function* describeFactors(table: IsoscalarTable): Generator<string> {
  yield heading(table);
  for (const { irrep, copy, multiplicity } of copies(table)) {
    const title = `${copyName(irrep, copy, multiplicity)}  (dimension ${irrepDimension(irrep)}, p,q = ${irrep.p},${irrep.q})`;
    const rows = isospinMultiplets(irrep).flatMap((place) => {
      const channels = table.channels(place);
      const names = channels.map(
        (c) =>
          `${placeName(table.left, { threeY: c.threeY1, twoI: c.twoI1 }, "first")} ${placeName(table.right, { threeY: c.threeY2, twoI: c.twoI2 }, "second")}`,
      );
      const values = channels.map((channel) => formatRoot(table.factor(irrep, copy, place, channel)));
      return [
        [placeName(irrep, place, "first"), placeText(place), ...names],
        ["", "", ...values],
      ];
    });
    yield `\n${title}\n${textTable(rows, { indent: 2 })}`;
  }
}

function* describeStates(table: IsoscalarTable): Generator<string> {
  const rows = [...stateCoefficients(table)].map((c: StateCoefficient) => {
    const { multiplicity } = table.series.find(
      ({ irrep }) => irrep.p === c.product.irrep.p && irrep.q === c.product.irrep.q,
    )!;
    const ket = (s: { threeY: number; twoI: number; twoI3: number }) =>
      `|${fractionText(s.threeY, 3)}, ${fractionText(s.twoI, 2)}, ${fractionText(s.twoI3, 2)}>`;
    return [
      copyName(c.product.irrep, c.copy, multiplicity),
      ket(c.product),
      ket(c.left),
      ket(c.right),
      formatRoot(c.value),
    ];
  });
  yield `${heading(table)}states are |Y, I, I3>\n\n`;
  yield textTable([["irrep", "product", "first", "second", "coefficient"], ...rows], { indent: 2 });
}

function copies(table: IsoscalarTable): { irrep: Irrep; copy: number; multiplicity: number }[] {
  return table.series.flatMap(({ irrep, multiplicity }) =>
    Array.from({ length: multiplicity }, (_, k) => ({ irrep, copy: k + 1, multiplicity })),
  );
}
