import { refuse } from "../require.js";
import { type Irrep, irrepDimension, irrepName, parseIrrep, sameIrrep } from "../su3/irrep.js";
import { type CouplingPath, couplingPaths, decomposeProduct } from "../su3/product.js";
import { canonicalJson } from "../tables/canonical-json.js";
import { copyName } from "./labels.js";
import { textTable } from "./text-table.js";

/** `couplet product`: decomposes a product of irreps and prints how each of them is reached. */
export function runProduct(texts: readonly string[], options: { json?: true }): void {
  if (texts.length < 2)
    refuse("couplet product", "two or more irreps", texts.join(" "), "For example: couplet product 8 8.");
  const irreps = texts.map(parseIrrep);
  const paths = couplingPaths(irreps);
  if (options.json)
    process.stdout.write(
      `${JSON.stringify(canonicalJson("couplet.v1.Product", message(irreps, paths)), null, 2)}\n`,
    );
  else process.stdout.write(describe(irreps, paths));
}

function message(irreps: readonly Irrep[], paths: readonly CouplingPath[]) {
  const terms = paths.map(({ irrep, path }) => ({
    irrep,
    dimension: irrepDimension(irrep),
    path: [...path],
  }));
  return { factors: [...irreps], terms };
}

function describe(irreps: readonly Irrep[], paths: readonly CouplingPath[]): string {
  const product = irreps.map(irrepName).join(" x ");
  const total = irreps.reduce((value, irrep) => value * irrepDimension(irrep), 1);
  const dimensions = paths.reduce((sum, { irrep }) => sum + irrepDimension(irrep), 0);
  const head = `${product} = ${seriesText(paths)}\n${total} states, ${dimensions} on the right\n`;
  if (irreps.length === 2) return head;
  const rows = paths.map((path) => [irrepName(path.irrep), "by", pathText(irreps, path)]);
  return `${head}\nCoupled from left to right:\n${textTable(rows, { indent: 2 })}`;
}

/** `1 + 2*8 + 10`. */
function seriesText(paths: readonly CouplingPath[]): string {
  const terms: { irrep: Irrep; count: number }[] = [];
  for (const { irrep } of paths) {
    const known = terms.find((term) => sameIrrep(term.irrep, irrep));
    if (known === undefined) terms.push({ irrep, count: 1 });
    else known.count += 1;
  }
  return terms
    .map(({ irrep, count }) => (count === 1 ? irrepName(irrep) : `${count}*${irrepName(irrep)}`))
    .join(" + ");
}

/** `3 x 3 -> 3bar, x 3 -> 8`, with copies where a step has several. */
function pathText(irreps: readonly Irrep[], { path }: CouplingPath): string {
  let reached = irreps[0]!;
  const steps = path.map(({ irrep, copy }, k) => {
    const right = irreps[k + 1]!;
    const { multiplicity } = decomposeProduct(reached, right).find((entry) => sameIrrep(entry.irrep, irrep))!;
    reached = irrep;
    return `${k === 0 ? irrepName(irreps[0]!) + " " : ""}x ${irrepName(right)} -> ${copyName(irrep, copy, multiplicity)}`;
  });
  return steps.join(", ");
}
