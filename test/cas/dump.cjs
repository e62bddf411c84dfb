// Writes what the computer algebra systems check: products and dimensions as a GAP list, SU(2) numbers as JSON lines.
const { writeFileSync } = require("node:fs");
const { join } = require("node:path");

const dist = join(__dirname, "..", "..", "dist");
const { irrepDimension } = require(join(dist, "su3", "irrep.js"));
const { decomposeProduct } = require(join(dist, "su3", "product.js"));
const { clebschGordan } = require(join(dist, "su2", "clebsch-gordan.js"));
const { sixJ, isTriad } = require(join(dist, "su2", "six-j.js"));

const [folder] = process.argv.slice(2);
const irrepsUpTo = (n) =>
  Array.from({ length: n + 1 }, (_, sum) =>
    Array.from({ length: sum + 1 }, (_, q) => ({ p: sum - q, q })),
  ).flat();

const products = irrepsUpTo(3).flatMap((left) =>
  irrepsUpTo(3).map((right) => {
    const series = decomposeProduct(left, right).map(
      ({ irrep, multiplicity }) => `[[${irrep.p},${irrep.q}],${multiplicity}]`,
    );
    return `[[${left.p},${left.q}],[${right.p},${right.q}],[${series.join(",")}]]`;
  }),
);
const dimensions = irrepsUpTo(8).map((irrep) => `[[${irrep.p},${irrep.q}],${irrepDimension(irrep)}]`);
writeFileSync(
  join(folder, "su3.g"),
  `products := [${products.join(",\n")}];;\ndimensions := [${dimensions.join(",\n")}];;\n`,
);

const square = ({ sign, num, den }) => `${sign < 0 ? "-" : ""}${num}/${den}`;
const spins = [0, 1, 2, 3, 4, 5];
const lines = [];
for (const a of spins) {
  for (const b of spins) {
    for (let j = Math.abs(a - b); j <= a + b; j += 2) {
      for (let m1 = -a; m1 <= a; m1 += 2) {
        for (let m2 = -b; m2 <= b; m2 += 2) {
          if (Math.abs(m1 + m2) > j) continue;
          lines.push({
            clebschGordan: [a, m1, b, m2, j, m1 + m2],
            square: square(clebschGordan(a, m1, b, m2, j, m1 + m2)),
          });
        }
      }
    }
  }
}
const small = [0, 1, 2, 3];
for (const a of small)
  for (const b of small)
    for (const c of small)
      for (const d of small)
        for (const e of small)
          for (const f of small) {
            if (!isTriad(a, b, c) || !isTriad(a, e, f) || !isTriad(d, b, f) || !isTriad(d, e, c)) continue;
            lines.push({ sixJ: [a, b, c, d, e, f], square: square(sixJ(a, b, c, d, e, f)) });
          }
writeFileSync(join(folder, "su2.jsonl"), lines.map((line) => `${JSON.stringify(line)}\n`).join(""));
