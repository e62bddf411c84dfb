// Writes two contents in turn to one place until it is killed: `node kill-writer.cjs whole|naive PLACE A B`.
// `naive` writes straight into the place; it is there to prove that the test would see a half-written file.
const { readFileSync, writeFileSync } = require("node:fs");
const { writeWhole } = require("../../dist/tables/whole-file.js");

const [how, place, ...files] = process.argv.slice(2);
const contents = files.map((file) => readFileSync(file));
const write = how === "naive" ? writeFileSync : writeWhole;

process.stdout.write("ready\n");
for (let turn = 0; ; turn++) write(place, contents[turn % 2]);
