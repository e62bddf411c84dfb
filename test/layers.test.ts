import { readdirSync, readFileSync } from "node:fs";
import { join, relative, resolve, sep } from "node:path";
import { expect, test } from "vitest";

const SRC = resolve(__dirname, "../src");

/** Rooms of src/ in the order of DEVELOPERS.md section 4: each may import from those before it, leaves from `PLAIN` only. */
const ROOMS = [
  "exact",
  "su2",
  "su3",
  "hadrons",
  "couplings",
  "widths",
  "fit",
  "study",
  "model",
  "uncertainty",
  "completion",
  "tables",
  "published",
  "audit",
  "sidecar",
  "cli",
];
const PLAIN = ["errors.ts", "require.ts", "nearest-names.ts"];
const LEAVES = ["widths", "fit", "study"];
/** Generated messages and the version: for those who write and read files, or talk to others. */
const OUTER = ["gen", "version.ts"];

/** Pairs of rooms with the files that import across: [from, to, file]. */
function importsAcross(): [string, string, string][] {
  return (
    readdirSync(SRC, { recursive: true, encoding: "utf8" })
      .filter((file) => file.endsWith(".ts") && !file.startsWith(`gen${sep}`))
      .flatMap((file) => {
        const text = readFileSync(join(SRC, file), "utf8");
        return [...text.matchAll(/(?:from|import\(|require\()\s*"(\.[^"]+)"/g)].map(
          ([, name]): [string, string, string] => {
            const target = relative(SRC, resolve(SRC, file, "..", name!)).replace(/\.js$/, ".ts");
            return [file.split(sep)[0]!, target.split(sep)[0]!, file];
          },
        );
      })
      // What lies outside src/ (package.json) is of no room.
      .filter(([from, to]) => from !== to && to !== "..")
  );
}

function isAllowed(from: string, to: string): boolean {
  if (from === "index.ts") return to !== "cli" && to !== "sidecar";
  if (from === "require.ts") return to === "errors.ts";
  // Clients know the schema only, as those in other languages do.
  if (from === "clients") return to === "gen";
  if (PLAIN.includes(to)) return ROOMS.includes(from);
  if (OUTER.includes(to)) return ROOMS.indexOf(from) >= ROOMS.indexOf("tables");
  if (LEAVES.includes(from) || !ROOMS.includes(to)) return false;
  return ROOMS.indexOf(to) < ROOMS.indexOf(from);
}

test("imports between the rooms of src/ run one way", () => {
  const imports = importsAcross();
  expect(imports.length).toBeGreaterThan(500);
  const wrong = imports.filter(([from, to]) => !isAllowed(from, to));
  expect(wrong.map(([from, to, file]) => `${file}: ${from} -> ${to}`)).toEqual([]);
});

test("the rule notices an import the other way, of a leaf, and of an unknown room", () => {
  expect(isAllowed("fit", "model")).toBe(false);
  expect(isAllowed("fit", "exact")).toBe(false);
  expect(isAllowed("model", "gen")).toBe(false);
  expect(isAllowed("tables", "attic")).toBe(false);
  expect(isAllowed("model", "fit")).toBe(true);
});
