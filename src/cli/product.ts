import { refuse } from "../require.js";
import { type PathContent, productContent } from "../su3/content.js";
import { type Irrep, irrepDimension, irrepName, parseIrrep, sameIrrep } from "../su3/irrep.js";
import { type CouplingPath, couplingPaths, decomposeProduct } from "../su3/product.js";
import { canonicalJson } from "../tables/canonical-json.js";
import { exactMessage } from "../tables/exact-message.js";
import { COLOURS, constituents, describeContent, FLAVOURS, type Letters } from "./content.js";
import { copyName } from "./labels.js";
import { print, printJson } from "./print.js";
import { textTable } from "./text-table.js";

/** What `couplet product` was asked for. */
export interface ProductOptions {
  readonly into?: string;
  readonly content?: true;
  readonly colour?: true;
  readonly json?: true;
}

/** `couplet product`: decomposes a product of irreps, how each is reached, and what its states consist of. */
export function runProduct(texts: readonly string[], options: ProductOptions): void {
  if (texts.length < 2)
    refuse("couplet product", "two or more irreps", texts.join(" "), "For example: couplet product 8 8.");
  if (options.colour && !options.content)
    refuse("couplet product: --colour", "--content beside it", "no --content", "It chooses the letters.");
  const irreps = texts.map(parseIrrep);
  const into = options.into === undefined ? undefined : parseIrrep(options.into);
  const paths = pathsInto(irreps, into);
  const contents = options.content ? productContent(irreps, into) : [];
  const letters = options.colour ? COLOURS : FLAVOURS;
  if (options.json) {
    const message = productMessage(irreps, paths, contents, letters);
    printJson(canonicalJson("couplet.v1.Product", message));
    return;
  }
  print(describe(irreps, paths, into));
  if (options.content) {
    const byPath = ({ path }: PathContent) => pathText(irreps, path);
    print(describeContent(contents, irreps, letters, byPath));
  }
}

function pathsInto(irreps: readonly Irrep[], into: Irrep | undefined): CouplingPath[] {
  const paths = couplingPaths(irreps);
  if (into === undefined) return paths;
  const wanted = paths.filter(({ irrep }) => sameIrrep(irrep, into));
  if (wanted.length > 0) return wanted;
  refuse("couplet product: --into", `an irrep of the product ${seriesText(paths)}`, irrepName(into));
}

function productMessage(
  irreps: readonly Irrep[],
  paths: readonly CouplingPath[],
  contents: readonly PathContent[],
  letters: Letters,
) {
  const terms = paths.map(({ irrep, path }, k) => ({
    irrep,
    dimension: irrepDimension(irrep),
    path: [...path],
    states: (contents[k]?.states ?? []).map(({ state, terms }) => ({
      state,
      terms: terms.map((term) => ({
        constituents: constituents(term, irreps, letters),
        value: exactMessage(term.value),
      })),
    })),
  }));
  return { factors: [...irreps], terms };
}

function describe(irreps: readonly Irrep[], paths: readonly CouplingPath[], into: Irrep | undefined): string {
  const product = irreps.map(irrepName).join(" x ");
  const total = irreps.reduce((value, irrep) => value * irrepDimension(irrep), 1);
  const dimensions = paths.reduce((sum, { irrep }) => sum + irrepDimension(irrep), 0);
  const head =
    into === undefined
      ? `${product} = ${seriesText(paths)}\n${total} states, ${dimensions} on the right\n`
      : `${product} contains ${seriesText(paths)}\n${dimensions} of ${total} states\n`;
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
