import { formatRoot } from "../exact/signed-root.js";
import { type Irrep, irrepDimension, irrepName, isospinMultiplets, parseIrrep } from "../su3/irrep.js";
import type { IsoscalarTable } from "../su3/isoscalar-factors.js";
import { isoscalarTable } from "../su3/isoscalar-factors.js";
import { canonicalJson } from "../tables/canonical-json.js";
import {
  encodeFactors,
  factorsMessage,
  type StateCoefficient,
  stateCoefficients,
} from "../tables/encode-factors.js";
import { writeWhole } from "../tables/whole-file.js";
import { copyName, fractionText, placeName, placeText } from "./labels.js";
import { textTable } from "./text-table.js";

/** `couplet factors`: isoscalar factors of a product, for people, as JSON or into a file. */
export function runFactors(
  leftText: string,
  rightText: string,
  options: { into?: string; states?: true; json?: true; out?: string },
): void {
  const [left, right] = [parseIrrep(leftText), parseIrrep(rightText)];
  const table = isoscalarTable(
    left,
    right,
    options.into === undefined ? {} : { into: parseIrrep(options.into) },
  );
  const withStates = options.states === true;
  if (options.out !== undefined) {
    const bytes = encodeFactors(table, { states: withStates });
    writeWhole(options.out, bytes);
    if (!options.json) process.stdout.write(`wrote ${options.out} (${bytes.length} bytes)\n`);
  }
  if (options.json) {
    process.stdout.write(
      `${JSON.stringify(canonicalJson("couplet.v1.FactorTable", factorsMessage(table, { states: withStates })), null, 2)}\n`,
    );
  } else if (options.out === undefined) {
    process.stdout.write(withStates ? describeStates(table) : describeFactors(table));
  }
}

function heading(table: IsoscalarTable): string {
  const product = `${irrepName(table.left)} x ${irrepName(table.right)}`;
  const series = table.series.map(
    ({ irrep, multiplicity }) => (multiplicity > 1 ? `${multiplicity}*` : "") + irrepName(irrep),
  );
  return `${product} = ${series.join(" + ")}\nconvention ${table.convention}; copies by ${table.multiplicityRule}; first factor first\n`;
}

function describeFactors(table: IsoscalarTable): string {
  const blocks = copies(table).map(({ irrep, copy, multiplicity }) => {
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
    return `\n${title}\n${textTable(rows, { indent: 2 })}`;
  });
  return heading(table) + blocks.join("");
}

function describeStates(table: IsoscalarTable): string {
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
  return `${heading(table)}states are |Y, I, I3>\n\n${textTable([["irrep", "product", "first", "second", "coefficient"], ...rows], { indent: 2 })}`;
}

function copies(table: IsoscalarTable): { irrep: Irrep; copy: number; multiplicity: number }[] {
  return table.series.flatMap(({ irrep, multiplicity }) =>
    Array.from({ length: multiplicity }, (_, k) => ({ irrep, copy: k + 1, multiplicity })),
  );
}
