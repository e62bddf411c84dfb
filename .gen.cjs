// Generates the Protocol Buffers code from proto/: a static module for speed, and the schema as JSON for canonical
// JSON. `--copy` puts both beside the compiled code.
const { execFileSync } = require("node:child_process");
const { copyFileSync, mkdirSync, readdirSync } = require("node:fs");
const { join } = require("node:path");

const directory = join("proto", "couplet", "v1");
const protos = readdirSync(directory).filter((name) => name.endsWith(".proto")).sort();
const pbjs = (...options) =>
  execFileSync(process.execPath, [require.resolve("protobufjs-cli/bin/pbjs"), "-p", "proto", ...options,
    ...protos.map((name) => join(directory, name))], { stdio: "inherit" });

if (process.argv.includes("--copy")) {
  mkdirSync(join("dist", "gen"), { recursive: true });
  for (const name of ["couplet.js", "couplet.d.ts", "schema.json"]) {
    copyFileSync(join("src", "gen", name), join("dist", "gen", name));
  }
} else {
  mkdirSync(join("src", "gen"), { recursive: true });
  pbjs("-t", "static-module", "-w", "commonjs", "--null-semantics", "-d", "-o", join("src", "gen", "couplet.js"));
  pbjs("-t", "json", "-o", join("src", "gen", "schema.json"));
}
