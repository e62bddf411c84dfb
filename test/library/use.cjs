// The library under CommonJS, from an empty project: exact algebra, the whole chain, and the errors.
const assert = require("node:assert/strict");
const { readFileSync } = require("node:fs");
const couplet = require("couplet");

const { factors } = couplet.canonicalJson("couplet.v1.FactorTable", {
  ...couplet.decodeFactors(
    couplet.encodeFactors(couplet.isoscalarTable({ p: 1, q: 0 }, { p: 0, q: 1 }), { states: false }),
    "3x3bar.pb",
  ),
});
// <N Nbar | 1> and <Lambda Lambdabar | 1> of a triplet and an antitriplet: two thirds and one third.
assert.deepEqual(
  factors.filter(({ irrep }) => irrep.p === 0).map(({ value }) => `${value.numerator}/${value.denominator}`),
  ["2/3", "1/3"],
);

const bytes = readFileSync("short.yaml");
const fit = couplet.fitModel(couplet.resolveStudy(couplet.readStudy(bytes, "short.yaml")));
const file = couplet.encodeDecays(couplet.complete(fit, couplet.minimaToTabulate(fit)[0]));
const tables = couplet.decodeDecays(file, "short.decays.pb");
assert.equal(tables.parents.length, 10);
for (const { rows } of tables.parents) {
  assert.equal(
    rows.reduce((sum, { partsPerBillion }) => sum + partsPerBillion, 0),
    1_000_000_000,
  );
}
assert.throws(
  () => couplet.parseIrrep("15"),
  (error) =>
    error instanceof couplet.InputError && error instanceof couplet.CoupletError && error.exitCode === 2,
);
console.log(`CommonJS: ${tables.parents.length} decay tables`);
