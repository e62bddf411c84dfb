// The library as an ECMAScript module: named imports, and the same numbers.
import assert from "node:assert/strict";
import * as all from "couplet";
import {
  catalogueParticle,
  clebschGordan,
  decomposeProduct,
  formatRoot,
  irrepName,
  parseIrrep,
} from "couplet";

const octet = parseIrrep("8");
const series = decomposeProduct(octet, octet).map(
  ({ irrep, multiplicity }) => `${multiplicity}*${irrepName(irrep)}`,
);
assert.deepEqual(series, ["1*1", "2*8", "1*10", "1*10bar", "1*27"]);
assert.equal(formatRoot(clebschGordan(1, 1, 1, -1, 0, 0)), "sqrt(1/2)");
assert.equal(catalogueParticle("K-").mcNumber, -321);
assert.ok(Object.keys(all).includes("readStudy"));
console.log(`ECMAScript modules: ${Object.keys(all).filter((name) => name !== "default").length} names`);
