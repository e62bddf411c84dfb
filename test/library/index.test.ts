import { readFileSync } from "node:fs";
import { dirname, join, resolve } from "node:path";
import ts from "typescript";
import { describe, expect, test } from "vitest";
import "../cli/command.js";

const ROOT = resolve(__dirname, "../..");
const index = join(ROOT, "src/index.ts");

/** Every declaration file that a user of the library reads, from `index.d.ts` on, with the packages they name. */
function declarations(): { files: string[]; packages: Set<string> } {
  const files: string[] = [];
  const packages = new Set<string>();
  const visit = (file: string): void => {
    if (files.includes(file)) return;
    files.push(file);
    const imports = readFileSync(file, "utf8").matchAll(/(?:from|require\(|import\()\s*"([^"]+)"/g);
    for (const [, name] of imports) {
      if (name!.startsWith(".")) visit(resolve(dirname(file), name!.replace(/\.js$/, ".d.ts")));
      else packages.add(name!);
    }
  };
  visit(join(ROOT, "dist/index.d.ts"));
  return { files, packages };
}

describe("the library's declarations", () => {
  const { files, packages } = declarations();

  test("name no package but those of Protocol Buffers", () => {
    expect(files.length).toBeGreaterThan(20);
    expect([...packages].sort()).toEqual(["long", "protobufjs/minimal"]);
    const { dependencies } = JSON.parse(readFileSync(join(ROOT, "package.json"), "utf8"));
    for (const name of packages) expect(dependencies).toHaveProperty(name.split("/")[0]!);
  });

  test("hold no type of mathjs", () => {
    for (const file of files) expect(readFileSync(file, "utf8"), file).not.toMatch(/mathjs/i);
  });
});

describe("the library's face", () => {
  const program = ts.createProgram([index], {
    target: ts.ScriptTarget.ES2023,
    module: ts.ModuleKind.Node20,
    strict: true,
    resolveJsonModule: true,
    types: ["node"],
    skipLibCheck: true,
    noEmit: true,
  });
  const source = program.getSourceFile(index)!;

  test("is exports only", () => {
    const kinds = source.statements.map(({ kind }) => ts.SyntaxKind[kind]);
    expect([...new Set(kinds)]).toEqual(["ExportDeclaration"]);
  });

  test("documents everything it exports", () => {
    const checker = program.getTypeChecker();
    const symbols = checker.getExportsOfModule(checker.getSymbolAtLocation(source)!);
    expect(symbols.length).toBeGreaterThan(100);
    const bare = symbols.filter((symbol) => {
      const target = symbol.flags & ts.SymbolFlags.Alias ? checker.getAliasedSymbol(symbol) : symbol;
      return target.getDocumentationComment(checker).length === 0;
    });
    expect(bare.map(({ name }) => name)).toEqual([]);
  });

  test("has the calls of the whole chain", async () => {
    const library = await import("../../src/index.js");
    for (const name of [
      "readStudy",
      "resolveStudy",
      "fitModel",
      "complete",
      "encodeDecays",
      "decodeDecays",
      "openDecays",
      "decayPieces",
      "sealedPieces",
      "writeWhole",
      "writeAllWhole",
      "writeWholePieces",
      "compareTables",
      "exportDecaysCsv",
      "exportCouplingsCsv",
      "exportDecaysLatex",
      "exportCouplingsLatex",
      "exportAccord",
      "validityWarnings",
      "studyWarnings",
      "isoscalarTable",
      "isoscalarFactor",
      "su3ClebschGordan",
      "clebschGordan",
      "parseIrrep",
      "irrepName",
      "decomposeProduct",
      "couplingPaths",
      "formatRoot",
      "parseRoot",
      "rootToNumber",
      "widthModel",
      "fAndD",
      "catalogueParticle",
      "catalogueMultiplet",
      "InputError",
      "TableError",
      "LimitError",
      "InternalError",
    ])
      expect(typeof library[name as keyof typeof library], name).toBe("function");
  });
});
