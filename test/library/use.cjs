// The library under CommonJS, from an empty project: exact algebra, the whole chain, and the errors.
const assert = require("node:assert/strict");
const { readFileSync, readdirSync } = require("node:fs");
const couplet = require("couplet");

const { factors: singlets } = couplet.canonicalJson("couplet.v1.FactorTable", {
  ...couplet.decodeFactors(
    couplet.encodeFactors(couplet.isoscalarTable({ p: 1, q: 0 }, { p: 0, q: 1 }), { states: false }),
    "3x3bar.pb",
  ),
});
// <N Nbar | 1> and <Lambda Lambdabar | 1> of a triplet and an antitriplet: two thirds and one third.
assert.deepEqual(
  singlets.filter(({ irrep }) => irrep.p === 0).map(({ value }) => `${value.numerator}/${value.denominator}`),
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

// A file written piece by piece and read parent by parent is the same table; nothing is left beside it.
const made = couplet.complete(fit, 0);
couplet.writeWholePieces("out/short.decays.pb", couplet.sealedPieces(couplet.decayPieces(made)));
assert.deepEqual(readFileSync("out/short.decays.pb"), file);
assert.deepEqual(readdirSync("out"), ["short.decays.pb"]);
const opened = couplet.openDecays("out/short.decays.pb");
assert.deepEqual(
  [...opened.parents()].map(({ hadron }) => hadron.name),
  tables.parents.map(({ hadron }) => hadron.name),
);
opened.close();

// Comparison, exports and warnings.
const table = couplet.isoscalarTable({ p: 1, q: 0 }, { p: 1, q: 0 });
const triplets = { bytes: couplet.encodeFactors(table, { states: false }), file: "t.pb" };
assert.equal(couplet.compareTables(triplets, triplets).changed, 0);
assert.equal(couplet.compareTables({ bytes: file, file: "a.pb" }, { bytes: file, file: "b.pb" }).counted, 0);
const couplings = couplet.decodeCouplings(couplet.encodeCouplings(couplet.couplingTable(fit, 0)), "c.pb");
couplet.writeAllWhole(
  [
    ["short.csv", couplet.exportDecaysCsv(tables)],
    ["couplings.csv", couplet.exportCouplingsCsv(couplings)],
    ["short.tex", couplet.exportDecaysLatex(tables)],
    ["couplings.tex", couplet.exportCouplingsLatex(couplings)],
    ["short.slha", couplet.exportAccord(tables, "short.decays.pb", { numbers: new Map(), rescale: true })],
  ].map(([name, text]) => ({ path: `out/${name}`, bytes: text })),
);
assert.equal(readdirSync("out").length, 6);
assert.ok(readFileSync("out/couplings.tex", "utf8").includes("\\begin{tabular}"));
assert.deepEqual(
  couplet.validityWarnings(fit, 0).flatMap(({ parents, text }) => (parents.length === 0 ? [text] : [])),
  couplet.studyWarnings(fit, 0),
);

assert.throws(
  () => couplet.parseIrrep("15"),
  (error) =>
    error instanceof couplet.InputError && error instanceof couplet.CoupletError && error.exitCode === 2,
);
console.log(`CommonJS: ${tables.parents.length} decay tables`);
