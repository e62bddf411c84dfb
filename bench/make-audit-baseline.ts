import { writeFileSync } from "node:fs";
import { join } from "node:path";
import { makeBaseline } from "../src/audit/baseline.js";
import { productsUpTo } from "../src/audit/identity-checks.js";
import { parseIrrep } from "../src/su3/irrep.js";
import { packageVersion } from "../src/version.js";

/**
 * Writes the tables `couplet audit` compares with: `npx ts-node -T bench/make-audit-baseline.ts`.
 *
 * To be run for a release, after the audit has passed against the baseline before it.
 */
const LARGE = [
  ["27", "8"],
  ["27", "10"],
  ["27", "27"],
  ["35", "10bar"],
  ["64", "8"],
  ["64", "27"],
  ["64", "64"],
  ["9,0", "0,9"],
  ["5,2", "2,6"],
  ["125", "125"],
].map((names) => names.map(parseIrrep) as [{ p: number; q: number }, { p: number; q: number }]);

const baseline = makeBaseline(packageVersion(), productsUpTo(3), LARGE);
const path = join(__dirname, "..", "src", "published", "baseline.json");
const products = baseline.products.map((product) => `    ${JSON.stringify(product)}`).join(",\n");
writeFileSync(
  path,
  `{\n  "version": ${JSON.stringify(baseline.version)},\n  "products": [\n${products}\n  ]\n}\n`,
);
console.log(`wrote ${path}: ${baseline.products.length} products`);
