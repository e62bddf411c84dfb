import {
  existsSync,
  lstatSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  symlinkSync,
  writeFileSync,
} from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterEach, beforeEach, describe, expect, test } from "vitest";
import { InputError } from "../../src/errors.js";
import { type WholeFile, writeAllWhole, writeWhole, writeWholePieces } from "../../src/tables/whole-file.js";

let folder = "";
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), "couplet-whole-"));
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

/** The message with which a place is refused, with the folder's name taken out. */
function refusal(path: string): string {
  try {
    writeWhole(path, "new");
  } catch (error) {
    if (error instanceof InputError) return error.message.replaceAll(folder, "");
    throw error;
  }
  throw new Error(`${path} was written`);
}

describe("a file is written", () => {
  test("with nothing left beside it, in folders that are made on the way", () => {
    writeWhole(join(folder, "a/b/t.pb"), Buffer.from([1, 2, 3]));
    expect([...readFileSync(join(folder, "a/b/t.pb"))]).toEqual([1, 2, 3]);
    expect(readdirSync(join(folder, "a/b"))).toEqual(["t.pb"]);
  });

  test("in place of an old one, keeping its mode", () => {
    const path = join(folder, "t.pb");
    writeFileSync(path, "old and longer", { mode: 0o640 });
    writeWhole(path, "new");
    expect(readFileSync(path, "utf8")).toBe("new");
    expect(lstatSync(path).mode & 0o777).toBe(0o640);
  });

  test("through a link to where it points", () => {
    mkdirSync(join(folder, "real"));
    writeFileSync(join(folder, "real/t.pb"), "old");
    symlinkSync(join(folder, "real/t.pb"), join(folder, "link.pb"));
    writeWhole(join(folder, "link.pb"), "new");
    expect(lstatSync(join(folder, "link.pb")).isSymbolicLink()).toBe(true);
    expect(readFileSync(join(folder, "real/t.pb"), "utf8")).toBe("new");
  });

  test("past a stale file of a killed run, which is never taken for it", () => {
    const path = join(folder, "t.pb");
    const stale = join(folder, ".t.pb.0123456789abcdef");
    writeFileSync(stale, "half");
    writeWhole(path, "new");
    expect(readFileSync(path, "utf8")).toBe("new");
    expect(readFileSync(stale, "utf8")).toBe("half");
  });

  test("past a link laid at a name that could be foreseen", () => {
    const [path, other] = [join(folder, "t.pb"), join(folder, "precious")];
    writeFileSync(other, "precious");
    for (const name of [`.t.pb.${process.pid}`, `t.pb.${process.pid}`])
      symlinkSync(other, join(folder, name));
    writeWhole(path, "new");
    expect([readFileSync(path, "utf8"), readFileSync(other, "utf8")]).toEqual(["new", "precious"]);
  });

  test("whole by each of two writers at the same time in processes of the same number, the later one last", () => {
    const path = join(folder, "t.pb");
    const seen: string[] = [];
    function* pieces() {
      yield Buffer.from("first, ");
      // What a thread, or a process in another container, does meanwhile.
      writeWhole(path, "second");
      seen.push(readFileSync(path, "utf8"));
      yield Buffer.from("and slow");
    }
    writeWholePieces(path, pieces());
    expect([...seen, readFileSync(path, "utf8")]).toEqual(["second", "first, and slow"]);
    expect(readdirSync(folder)).toEqual(["t.pb"]);
  });

  test("under a name beside it that a watcher is told before and after", () => {
    const told: [string, boolean][] = [];
    writeWhole(join(folder, "t.pb"), "new", (beside, exists) => told.push([beside, exists]));
    expect(told.map(([, exists]) => exists)).toEqual([true, false]);
    expect(told[0]![0]).toMatch(/\/\.t\.pb\.[0-9a-f]{16}$/);
    expect(told[1]![0]).toBe(told[0]![0]);
  });
});

describe("a place is refused in words, and stays as it was", () => {
  test("that is a folder", () => {
    mkdirSync(join(folder, "d"));
    expect(refusal(join(folder, "d"))).toBe(
      "/d: expected a place for a file, got a folder. Name a file in it.",
    );
    expect(readdirSync(join(folder, "d"))).toEqual([]);
  });

  test("under a file", () => {
    writeFileSync(join(folder, "f"), "old");
    for (const path of ["/f/t.pb", "/f/deep/t.pb"]) {
      expect(refusal(join(folder, path))).toBe(
        `${path}: could not be written: ENOTDIR: not a directory. A part of the path is a file; choose another folder. Nothing was changed.`,
      );
    }
    expect(readFileSync(join(folder, "f"), "utf8")).toBe("old");
  });

  test("with a name that is too long, and takes away the folders it made", () => {
    const name = "n".repeat(300);
    expect(refusal(join(folder, "made/deep", name))).toBe(
      `/made/deep/${name}: could not be written: ENAMETOOLONG: name too long. Choose a shorter name. Nothing was changed.`,
    );
    expect(readdirSync(folder)).toEqual([]);
  });

  test("without a name", () => {
    expect(refusal("")).toBe("expected the name of a file to write, got an empty name.");
  });

  test("where the system lets nobody write", () => {
    expect(refusal("/proc/t.pb")).toBe(
      "/proc/t.pb: could not be written: ENOENT: no such file or directory. Choose another folder. Nothing was changed.",
    );
    expect(existsSync("/proc/t.pb")).toBe(false);
  });
});

describe("several files are written", () => {
  const files = (...names: string[]) =>
    names.map((name) => ({ path: join(folder, name), bytes: Buffer.from(`new ${name}`) }));
  const text = (name: string) => readFileSync(join(folder, name), "utf8");
  /** A file at whose place a folder is made once its bytes are asked for. */
  const whosePlaceChanges = ({ path, bytes }: WholeFile): WholeFile => ({
    path,
    get bytes() {
      mkdirSync(path);
      return bytes;
    },
  });
  const refusalOfAll = (list: readonly WholeFile[]) => {
    try {
      writeAllWhole(list);
    } catch (error) {
      if (error instanceof InputError) return error.message.replaceAll(folder, "");
      throw error;
    }
    throw new Error("all were written");
  };

  test("with nothing left beside them, in folders that are made on the way, keeping modes and links", () => {
    writeFileSync(join(folder, "old"), "old", { mode: 0o640 });
    symlinkSync(join(folder, "old"), join(folder, "link"));
    writeAllWhole(files("link", "a/b/t", "a/u"));
    expect([text("old"), text("a/b/t"), text("a/u")]).toEqual(["new link", "new a/b/t", "new a/u"]);
    expect(lstatSync(join(folder, "link")).isSymbolicLink()).toBe(true);
    expect(lstatSync(join(folder, "old")).mode & 0o777).toBe(0o640);
    expect(readdirSync(folder).sort()).toEqual(["a", "link", "old"]);
    expect(readdirSync(join(folder, "a"), { recursive: true }).sort()).toEqual(["b", "b/t", "u"]);
  });

  test("none of them where the last place is a folder: old files are intact, and no folder is made", () => {
    writeFileSync(join(folder, "1"), "old 1");
    mkdirSync(join(folder, "3"));
    expect(refusalOfAll(files("1", "made/2", "3"))).toBe(
      "/3: expected a place for a file, got a folder. Name a file in it.",
    );
    expect(text("1")).toBe("old 1");
    expect(readdirSync(folder).sort()).toEqual(["1", "3"]);
    expect(refusalOfAll(files("1", "made/2", `made/${"n".repeat(300)}`))).toMatch(/Nothing was changed\.$/);
    expect(readdirSync(folder).sort()).toEqual(["1", "3"]);
  });

  test("as far as the system lets them: a place that changes meanwhile is told, with what is new", () => {
    // After the second file's place was looked at, and before anything is renamed.
    expect(refusalOfAll([...files("1"), ...files("2").map(whosePlaceChanges)])).toBe(
      "/2: could not be written: EISDIR: illegal operation on a directory. Choose another folder. New are /1; as before: /2.",
    );
    expect([text("1"), readdirSync(join(folder, "2"))]).toEqual(["new 1", []]);
    expect(readdirSync(folder).sort()).toEqual(["1", "2"]);
  });

  test("not at all where already the first cannot be renamed", () => {
    expect(refusalOfAll([...files("1").map(whosePlaceChanges), ...files("2")])).toMatch(
      /^\/1: .*EISDIR.* Nothing was changed\.$/,
    );
    expect(readdirSync(folder)).toEqual(["1"]);
  });
});

test("a file in pieces replaces what a link points to, and keeps its mode", () => {
  const old = join(folder, "old");
  writeFileSync(old, "old", { mode: 0o640 });
  symlinkSync(old, join(folder, "link"));
  expect(writeWholePieces(join(folder, "link"), [Buffer.from("ne"), Buffer.from("w")])).toBe(3);
  expect(lstatSync(join(folder, "link")).isSymbolicLink()).toBe(true);
  expect([readFileSync(old, "utf8"), lstatSync(old).mode & 0o777]).toEqual(["new", 0o640]);
});
