import { spawnSync } from "node:child_process";
import { existsSync, mkdtempSync, readdirSync, rmSync, statSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { dirname, join, resolve } from "node:path";

const ROOT = resolve(__dirname, "../..");

/** The built command; the tests run what a user runs. */
export const COMMAND = join(ROOT, "dist/cli/main.js");

requireFreshBuild();

/** What one run of the command printed, and its exit code. */
export interface Run {
  readonly code: number | null;
  readonly out: string;
  readonly error: string;
}

/** Runs `couplet` with some arguments in a folder. */
export function couplet(folder: string, ...args: readonly string[]): Run {
  const { status, stdout, stderr } = spawnSync(process.execPath, [COMMAND, ...args], {
    cwd: folder,
    encoding: "utf8",
    maxBuffer: 2 ** 28,
    timeout: 60_000,
    env: { ...process.env, NO_COLOR: "1" },
  });
  return { code: status, out: stdout, error: stderr };
}

/** A refusal: one message, which names the program once, nothing printed, exit code 2. */
export function refusal(message: string, code = 2): Run {
  const error = message.startsWith("couplet ") ? message : `couplet: ${message}`;
  return { code, out: "", error: `${error}\n` };
}

/** An empty folder, filled with some files; `remove` takes it away. */
export function scratchFolder(files: Readonly<Record<string, string | Uint8Array>> = {}): {
  readonly folder: string;
  readonly remove: () => void;
} {
  const folder = mkdtempSync(join(tmpdir(), "couplet-cli-"));
  for (const [name, content] of Object.entries(files)) writeFileSync(join(folder, name), content);
  return { folder, remove: () => rmSync(folder, { recursive: true, force: true }) };
}

/** Stale code would test what is no longer there. */
function requireFreshBuild(): void {
  const mend = "Run `npm run build` first: these tests run the built command.";
  if (!existsSync(COMMAND)) throw new Error(`${COMMAND} is missing. ${mend}`);
  const stale = sources(join(ROOT, "src")).find((source) => {
    const built = join(ROOT, "dist", source.slice(join(ROOT, "src/").length)).replace(/\.ts$/, ".js");
    return !existsSync(built) || statSync(built).mtimeMs < statSync(source).mtimeMs;
  });
  if (stale !== undefined) throw new Error(`dist/ is older than ${stale}. ${mend}`);
}

function sources(folder: string): string[] {
  return readdirSync(folder, { recursive: true, encoding: "utf8" })
    .filter((name) => name.endsWith(".ts") && !name.endsWith(".d.ts"))
    .map((name) => join(folder, name))
    .filter((name) => !dirname(name).includes(join("src", "gen")) && !name.includes(join("src", "clients")));
}
