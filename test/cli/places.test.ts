import { spawnSync } from "node:child_process";
import { mkdirSync, readdirSync, readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { afterAll, describe, expect, test } from "vitest";
import { complete } from "../../src/completion/complete.js";
import { couplet as proto } from "../../src/gen/couplet.js";
import { encodeDecays } from "../../src/tables/encode-decays.js";
import { sealBytes } from "../../src/tables/sealed-bytes.js";
import { fitOf } from "../chain/run.js";
import { couplet, refusal, scratchFolder } from "./command.js";

const SHORT = readFileSync(join(__dirname, "../library/short.yaml"), "utf8");
const { folder, remove } = scratchFolder({ "short.yaml": SHORT, "file.txt": "precious" });
afterAll(remove);

const run = (...args: string[]) => couplet(folder, ...args);

describe("an output place that cannot be is refused, and nothing changes", () => {
  test("a folder in the file's place", () => {
    mkdirSync(join(folder, "out/short.decays.pb"), { recursive: true });
    expect(run("tables", "short.yaml", "-o", "out")).toEqual(
      refusal("out/short.decays.pb: expected a place for a file, got a folder. Name a file in it."),
    );
    expect(readdirSync(join(folder, "out"))).toEqual(["short.decays.pb"]);
    expect(run("factors", "3", "3bar", "--out", "out")).toEqual(
      refusal("out: expected a place for a file, got a folder. Name a file in it."),
    );
  });

  test("a file where the folder should be", () => {
    expect(run("tables", "short.yaml", "-o", "file.txt")).toEqual(
      refusal(
        "file.txt/short.decays.pb: could not be written: ENOTDIR: not a directory. A part of the path is a file; choose another folder. Nothing was changed.",
      ),
    );
    expect(readFileSync(join(folder, "file.txt"), "utf8")).toBe("precious");
  });

  // Root may write to a read-only folder, but nobody can to /proc.
  test("a folder that nobody can write to", () => {
    expect(run("tables", "short.yaml", "-o", "/proc/couplet")).toEqual(
      refusal(
        "/proc/couplet/short.decays.pb: could not be written: ENOENT: no such file or directory. Choose another folder. Nothing was changed.",
      ),
    );
  });

  // A file system of its own, of 16 kB, where the user may have one; only root may without a user namespace.
  const mount = "mount -t tmpfs -o size=16k tmpfs full && ";
  const withNamespace = (script: string) =>
    spawnSync("unshare", ["--mount", "--map-root-user", "sh", "-c", mount + script], {
      cwd: folder,
      encoding: "utf8",
    });
  mkdirSync(join(folder, "full"));
  const canMount = withNamespace("true").status === 0;

  test.runIf(canMount)("a full disk, with an old file that stays", () => {
    const command = `"${process.execPath}" "${join(__dirname, "../../dist/cli/main.js")}" factors 8 8 --out full/t.pb`;
    const { status, stdout, stderr } = withNamespace(
      `printf old >full/t.pb; dd if=/dev/zero of=full/rest bs=1k 2>/dev/null; ${command}; code=$?; cat full/t.pb; ls full | tr '\\n' ' '; exit $code`,
    );
    expect([status, stdout, stderr]).toEqual([
      2,
      "oldrest t.pb ",
      "couplet: full/t.pb: could not be written: ENOSPC: no space left on device. Free space, or choose a folder on another disk. Nothing was changed.\n",
    ]);
  });
});

describe("a table file that cannot be shown", () => {
  const bytes = encodeDecays(complete(fitOf(SHORT), 0));
  const show = (content: string | Uint8Array) => {
    writeFileSync(join(folder, "t.pb"), content);
    return run("show", "t.pb");
  };

  test("is not ours: exit code 2", () => {
    const message = (count: number) =>
      `t.pb: expected a table file written by Couplet, got something else (${count} bytes). Give a .pb file that \`couplet tables\`, \`couplet couplings --out\` or \`couplet factors --out\` wrote.`;
    expect(show("")).toEqual(refusal(message(0)));
    expect(show("hello")).toEqual(refusal(message(5)));
    expect(show(Buffer.alloc(50_000_000))).toEqual(refusal(message(50_000_000)));
  });

  test("is damaged: exit code 3", () => {
    const damaged = Uint8Array.from(bytes);
    damaged[1000]! ^= 1;
    const message = (count: number) =>
      `t.pb: the file is damaged: its digest does not match its content (${count} bytes). Nothing was read; get a fresh copy or write the table again.`;
    expect(show(damaged)).toEqual(refusal(message(bytes.length), 3));
    expect(show(bytes.subarray(0, 1000))).toEqual(refusal(message(1000), 3));
  });

  test("is newer than this Couplet: exit code 3", () => {
    const tables = proto.v1.DecayTables.decode(bytes);
    const header = { ...tables.header, schemaMinor: 99 };
    const newer = sealBytes(proto.v1.DecayTables.encode({ ...tables, header, sha256: null }).finish());
    const { code, out, error } = show(newer);
    expect([code, out]).toEqual([3, ""]);
    expect(error).toMatch(
      /^couplet: t\.pb: expected schema version 1\.\d+ or older, got 1\.99\. Read it with a newer Couplet\.\n$/,
    );
  });
});
