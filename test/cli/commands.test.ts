import { existsSync, readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { decodeDecays } from "../../src/tables/decode-decays.js";
import { packageVersion } from "../../src/version.js";
import { couplet, refusal, scratchFolder } from "./command.js";

const SHORT = readFileSync(join(__dirname, "../library/short.yaml"), "utf8");

const { folder, remove } = scratchFolder({ "short.yaml": SHORT });
afterAll(remove);

const run = (...args: string[]) => couplet(folder, ...args);

describe("couplet", () => {
  test("lists its commands and exit codes", () => {
    const { code, out, error } = run("--help");
    expect([code, error]).toEqual([0, ""]);
    for (const command of ["demo", "new", "product", "factors", "fit", "tables", "show"])
      expect(out).toContain(`\n  ${command} `);
    const codes = out.replaceAll("\n", " ").split("Exit codes: ")[1]?.trimEnd().split("; ");
    expect(codes?.filter((text) => !text.startsWith("1 "))).toEqual([
      "0 done",
      "2 wrong input",
      "3 a damaged or newer table file",
      "4 a request too large",
      "70 a bug of ours",
      "130 stopped by the user.",
    ]);
    expect(run("--version")).toEqual({ code: 0, out: `${packageVersion()}\n`, error: "" });
  });

  test.each([
    [["foo"], "error: unknown command 'foo'"],
    [["fitt", "x"], "error: unknown command 'fitt'\n(Did you mean fit?)"],
    [["fit", "short.yaml", "--jsn"], "error: unknown option '--jsn'\n(Did you mean --json?)"],
    [["fit"], "error: missing required argument 'study'"],
    [["tables", "short.yaml"], "error: required option '-o, --out <folder>' not specified"],
  ])("%j is refused with exit code 2", (args, error) => {
    const hint = "(`couplet --help` lists the commands)";
    expect(run(...args)).toEqual({ code: 2, out: "", error: `${error}\n${hint}\n` });
  });
});

describe("couplet product", () => {
  test("decomposes a product and shows how each irrep is reached", () => {
    expect(run("product", "8", "8")).toEqual({
      code: 0,
      out: "8 x 8 = 1 + 2*8 + 10 + 10bar + 27\n64 states, 64 on the right\n",
      error: "",
    });
    const { out } = run("product", "3", "3", "3");
    expect(out.split("\n")).toEqual([
      "3 x 3 x 3 = 1 + 2*8 + 10",
      "27 states, 27 on the right",
      "",
      "Coupled from left to right:",
      "  1   by  3 x 3 -> 3bar, x 3 -> 1",
      "  8   by  3 x 3 -> 3bar, x 3 -> 8",
      "  8   by  3 x 3 -> 6, x 3 -> 8",
      "  10  by  3 x 3 -> 6, x 3 -> 10",
      "",
    ]);
  });

  test("refuses an ambiguous dimension with its choices, and what is no irrep", () => {
    expect(run("product", "15", "8")).toEqual(
      refusal(
        'expected 15(2,1) or 15(4,0), got "15". Dimension 15 belongs to several irreps; write the labels.',
      ),
    );
    expect(run("product", "8", "x")).toEqual(
      refusal('expected a dimension such as 8, 10 or 10bar, or labels p,q, got "x".'),
    );
    expect(run("product", "8")).toEqual(
      refusal('couplet product: expected two or more irreps, got "8". For example: couplet product 8 8.'),
    );
  });
});

describe("couplet factors", () => {
  test("prints a block for each irrep, with signed square roots", () => {
    const { code, out, error } = run("factors", "3", "3bar");
    expect([code, error]).toEqual([0, ""]);
    expect(out).toContain("3 x 3bar = 1 + 8\nconvention deswart-v1;");
    expect(out).toContain("sqrt(2/3)");
  });

  test("prints canonical JSON that holds every field", () => {
    const { code, out } = run("factors", "8", "8", "--into", "1", "--json");
    const { left, right, convention, multiplicityRule, factors } = JSON.parse(out);
    expect([code, left, right]).toEqual([0, { p: 1, q: 1 }, { p: 1, q: 1 }]);
    expect([convention, multiplicityRule]).toEqual(["deswart-v1", "exchange-then-first-channels-v1"]);
    expect(factors.length).toBe(4);
    expect(factors[0]).toEqual({
      irrep: { p: 0, q: 0 },
      copy: 1,
      threeY: 0,
      twoI: 0,
      threeY1: 3,
      twoI1: 1,
      threeY2: -3,
      twoI2: 1,
      value: { sign: 1, numerator: "1", denominator: "4", value: 0.5 },
    });
  });

  test("refuses a target that is not in the product, with those that are", () => {
    expect(run("factors", "8", "8", "--into", "64")).toEqual(
      refusal('into: expected one of 1, 8, 10, 10bar, 27, got "3,3".'),
    );
  });

  test("refuses a product that is too large beforehand, with exit code 4", () => {
    const { code, out, error } = run("factors", "60,60", "60,60");
    expect([code, out]).toEqual([4, ""]);
    expect(error).toMatch(/^couplet: expected at most \d+ channels, got \d+ or more .*\n$/);
  });
});

describe("couplet fit", () => {
  test("prints its minima as JSON, best first", () => {
    const { code, out, error } = run("fit", "short.yaml", "--json");
    expect([code, error]).toEqual([0, ""]);
    const { minima } = JSON.parse(out);
    expect(minima.length).toBeGreaterThan(0);
    const [best] = minima;
    expect([typeof best.chi2, best.ndf]).toEqual(["number", 2]);
    expect(best.parameters[0]).toMatchObject({ name: "g(10)", unit: "1" });
    expect(typeof best.parameters[0].value).toBe("number");
    expect(best.parameters[0].error).toBeGreaterThan(0);
  });

  test("prints them for people, with each measurement beside the fit", () => {
    const { out } = run("fit", "short.yaml");
    expect(out).toContain("Best minimum: chi2 ");
    expect(out).toContain("width Delta(1232) -> N pi");
  });
});

describe("couplet tables and couplet show", () => {
  beforeAll(() => {
    expect(run("tables", "short.yaml", "-o", "out").code).toBe(0);
  });
  const file = () => readFileSync(join(folder, "out/short.decays.pb"));

  test("a study of nine lines becomes a complete decay table", () => {
    expect(SHORT.trimEnd().split("\n").length).toBeLessThan(15);
    const { parents } = decodeDecays(file(), "short.decays.pb");
    expect(parents.map(({ hadron }) => hadron.name)).toEqual([
      "Delta(1232)++",
      "Delta(1232)+",
      "Delta(1232)0",
      "Delta(1232)-",
      "Sigma(1385)+",
      "Sigma(1385)0",
      "Sigma(1385)-",
      "Xi(1530)0",
      "Xi(1530)-",
      "Omega-",
    ]);
  });

  test("the same study gives the same bytes, in another process", () => {
    expect(run("tables", "short.yaml", "-o", "again").code).toBe(0);
    for (const name of readdirSync(join(folder, "out"))) {
      const again = readFileSync(join(folder, "again", name));
      expect(again.equals(readFileSync(join(folder, "out", name))), name).toBe(true);
    }
  });

  test("what was written is listed as JSON, with the digest of each file", () => {
    const { written } = JSON.parse(run("tables", "short.yaml", "-o", "json", "--json").out);
    const [decays] = written.filter((entry: { file: string }) => entry.file.endsWith(".decays.pb"));
    expect(decays).toMatchObject({ file: "json/short.decays.pb", parents: 10 });
    expect(decays.sha256).toBe(file().subarray(-32).toString("hex"));
  });

  test("show prints the cautions, each parent and the origin of each row", () => {
    const { code, out } = run("show", "out/short.decays.pb");
    expect(code).toBe(0);
    expect(out).toContain("caution: Not for radiation-protection or medical dose work");
    expect(out).toContain("Sigma(1385)0 -> (remainder)");
    const one = run("show", "out/short.decays.pb", "--parent", "Xi(1530)-").out;
    expect(one).toContain("\nXi(1530)-  mass");
    expect(one).not.toContain("\nXi(1530)0  mass");
    expect(run("show", "out/short.decays.pb", "--parent", "Xi(1530)")).toEqual(
      refusal(
        'out/short.decays.pb: expected a parent of this table, got "Xi(1530)". Nearest: Xi(1530)0, Xi(1530)-.',
      ),
    );
    const { error } = run("show", "out/short.decays.pb", "--parent", "?");
    expect(error).toMatch(
      /expected a parent of this table, got "\?"\. There are: Delta\(1232\)\+\+, .*, Omega-\.\n$/,
    );
  });

  test("show --parent --json is that parent's message, and a table without parents is refused", () => {
    const { hadron, rows } = JSON.parse(
      run("show", "out/short.decays.pb", "--parent", "Xi(1530)-", "--json").out,
    );
    expect(hadron.name).toBe("Xi(1530)-");
    expect(rows[0].id).toMatch(/^Xi\(1530\)- -> /);
    expect(run("show", "out/short.couplings.pb", "--parent", "Xi(1530)-")).toEqual(
      refusal(
        "out/short.couplings.pb: expected couplet.v1.DecayTables, got couplet.v1.CouplingTables. Give a file of the kind expected.",
      ),
    );
  });

  test("show --json is the message, zeros printed", () => {
    const { kind, parents } = JSON.parse(run("show", "out/short.decays.pb", "--json").out);
    expect(kind).toBe("couplet.v1.DecayTables");
    for (const { rows } of parents) {
      const parts = rows.map((row: { partsPerBillion: number }) => row.partsPerBillion);
      expect(parts.reduce((sum: number, part: number) => sum + part, 0)).toBe(1_000_000_000);
    }
  });

  test("measurements that leave no room refuse the table and name the entries", () => {
    const text = SHORT.replace("value: 12 +- 2 %", "value: 14 +- 2 %");
    const scratch = scratchFolder({ "s.yaml": text });
    const { code, out, error } = couplet(scratch.folder, "tables", "s.yaml", "-o", "out");
    expect([code, out, existsSync(join(scratch.folder, "out"))]).toEqual([2, "", false]);
    expect(error).toContain(
      "couplet: s.yaml: Sigma(1385)+: expected fractions that add up to at most 1, got 1.0100 of the total width 36.2 MeV:\n" +
        "  0.8700  Sigma(1385)+ -> Lambda pi+  (fraction Sigma(1385) -> Lambda pi, line 7)\n",
    );
    scratch.remove();
  });
});

test("the demo writes an invented study, runs it and says what to try next", () => {
  const { code, out, error } = run("demo", "--out", "demo");
  expect([code, error]).toEqual([0, ""]);
  for (const text of [
    "Every number in it is invented.",
    "F/D = ",
    "A second minimum has F/D = ",
    "Try next:",
  ])
    expect(out).toContain(text);
  expect(readdirSync(join(folder, "demo"))).toContain("larkfield.decays.pb");
});
