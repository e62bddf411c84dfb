#!/usr/bin/env node
import { isMainThread } from "node:worker_threads";
import { Command, CommanderError } from "commander";
import { CoupletError } from "../errors.js";
import { packageVersion } from "../version.js";
import type { AuditOptions } from "./audit.js";
import type { CompareOptions } from "./compare.js";
import { errorText } from "./error-text.js";
import type { ExportOptions } from "./export.js";
import type { FactorsOptions } from "./factors.js";
import type { FitOptions } from "./fit.js";
import { needsOwnThread, runInOwnThread } from "./own-thread.js";
import { printError } from "./print.js";
import type { ProductOptions } from "./product.js";
import type { ServeOptions } from "./serve.js";
import type { ShowOptions } from "./show.js";

// Each command's module is loaded when it runs, so that `couplet --help` starts fast.
function program(): Command {
  const root = new Command("couplet")
    .description(
      "Complete, signed, charge-by-charge decay tables from a few measured decays, by SU(3) flavour symmetry",
    )
    .version(packageVersion())
    .exitOverride()
    .showHelpAfterError("(`couplet --help` lists the commands)")
    .addHelpText(
      "after",
      `
An irrep is written 8, 10, 10bar, 27 or p,q. Exit codes: 0 done; 1 a comparison or audit found differences; 2 wrong input; 3 a damaged or newer table file;
4 a request too large; 70 a bug of ours; 130 stopped by the user.`,
    );
  root
    .command("demo")
    .description("write an invented study, run it to a decay table, say what to open")
    .option("-o, --out <folder>", "where to write", "couplet-demo")
    .action(async (options: { out: string }) => (await import("./demo.js")).runDemo(options));
  root
    .command("new")
    .description("write a commented starter study, and a JSON Schema for editors beside it")
    .argument("<name>", "its name; NAME.yaml and NAME.schema.json must not exist yet")
    .option("--schema", "only the JSON Schema, in place of an older one")
    .action(async (name: string, options: { schema?: true }) =>
      (await import("./new.js")).runNew(name, options),
    );
  root
    .command("product")
    .description("decompose a product of any number of irreps")
    .argument("<irreps...>", "two or more irreps, coupled from left to right")
    .option("--into <irrep>", "only this irrep of the product")
    .option("--content", "each state as a superposition of quarks; the factors are 3 and 3bar")
    .option("--colour", "with --content: colours r, g, b instead of quarks u, d, s")
    .option("--json", "canonical JSON of couplet.v1.Product")
    .action(async (irreps: string[], options: ProductOptions) =>
      (await import("./product.js")).runProduct(irreps, options),
    );
  root
    .command("factors")
    .description("isoscalar factors of a product of two irreps")
    .argument("<left>", "first factor; the baryon in decays")
    .argument("<right>", "second factor; the meson in decays")
    .option("--into <irrep>", "only this irrep of the product")
    .option("--states", "full coefficients between states instead")
    .option("--json", "canonical JSON of couplet.v1.FactorTable")
    .option("--out <file>", "write a Protocol Buffers file instead of printing")
    .action(async (left: string, right: string, options: FactorsOptions) =>
      (await import("./factors.js")).runFactors(left, right, options),
    );
  root
    .command("fit")
    .description("fit a study's reduced couplings: F and D, every minimum, pulls")
    .argument("<study>", "a study file (YAML)")
    .option("--profile", "68.3 and 95.4 % intervals by profile likelihood, right also near a zero")
    .option("--toys <n>", "so many pseudo-experiments: quantiles, coverage, probability of chi2")
    .option("--seed <n>", "with --toys: the seed (default: 1)")
    .option("--workers <n>", "with --toys: threads (default: one a processor); results do not depend on it")
    .option("--leave-one-out", "fits without each measurement in turn")
    .option("--models", "fits with every other width model, and the parts of each prediction's error")
    .option("--json", "all of this as JSON")
    .action(async (study: string, options: FitOptions) => (await import("./fit.js")).runFit(study, options));
  root
    .command("couplings")
    .description("fit a study, print the coupling of every vertex, exact and as a number")
    .argument("<study>", "a study file (YAML)")
    .option(
      "--json",
      "canonical JSON of couplet.v1.CouplingTables; a list where the study wants each minimum",
    )
    .option("--out <file>", "write a Protocol Buffers file instead of printing")
    .action(async (study: string, options: { json?: true; out?: string }) =>
      (await import("./couplings.js")).runCouplings(study, options),
    );
  root
    .command("tables")
    .description("fit a study, complete it, write its decay and coupling tables")
    .argument("<study>", "a study file (YAML)")
    .requiredOption("-o, --out <folder>", "where to write")
    .option("--json", "print what was written as JSON")
    .action(async (study: string, options: { out: string; json?: true }) =>
      (await import("./tables.js")).runTables(study, options),
    );
  root
    .command("show")
    .description("what a table file holds, for people")
    .argument("<file>", "a .pb file written by Couplet")
    .option("--parent <name>", "only this hadron, by name or Monte Carlo number")
    .option("--row <id>", "one row's number from its source on, e.g. 'Delta(1232)+ -> p pi0'")
    .option("--json", "canonical JSON of the message in the file, or of that parent or row")
    .action(async (file: string, options: ShowOptions) => (await import("./show.js")).runShow(file, options));
  root
    .command("compare")
    .description("what changed between two table files, by row, in percent and in sigma")
    .argument("<first>", "a decay, coupling or factor table file")
    .argument("<second>", "another of the same kind")
    .option("--percent <x>", "a change of more than x percent counts; 1 where neither is given")
    .option("--sigma <y>", "one of more than y standard deviations of both counts; 1 where neither is given")
    .option("--json", "every difference as JSON")
    .action(async (first: string, second: string, options: CompareOptions) =>
      (await import("./compare.js")).runCompare(first, second, options),
    );
  root
    .command("export")
    .description("a table file as comma-separated values, LaTeX, Les Houches accord text or JSON")
    .argument("<file>", "a .pb file written by Couplet")
    .requiredOption("--to <format>", "csv, latex, accord or json")
    .option("-o, --out <file>", "where to write; printed without")
    .option(
      "--number <name=id>",
      "accord: a Monte Carlo number for a hadron that has none; may be given again",
      (text: string, before: string[] = []) => [...before, text],
    )
    .option("--rescale", "accord: scale modes up to 1 where a part of the width has no final state")
    .action(async (file: string, options: ExportOptions) =>
      (await import("./export.js")).runExport(file, options),
    );
  root
    .command("serve")
    .description("serve tables and their evaluation to event generators over gRPC")
    .argument("[files...]", "decay table files; without any, built-in ground-state tables")
    .option("--listen <address>", "HOST:PORT or unix:PATH", "127.0.0.1:50610")
    .option(
      "--metrics <address>",
      "where to answer GET /metrics, on this machine only; or none",
      "127.0.0.1:50611",
    )
    .option("--tls-cert <file>", "the server's certificate and those above it (PEM)")
    .option("--tls-key <file>", "its key (PEM)")
    .option("--tls-client-ca <file>", "serve only clients with a certificate of these authorities (PEM)")
    .option("--allow-insecure-network", "serve other machines without TLS")
    .option("--drain-seconds <n>", "how long SIGTERM waits for running calls", "30")
    .option(
      "--log-level <level>",
      "debug, info, warn or error; the log is JSON lines on standard error",
      "info",
    )
    .action(async (files: string[], options: ServeOptions) =>
      (await import("./serve.js")).runServe(files, options),
    );
  root
    .command("audit")
    .description(
      "check the coefficients: published tables, identities, rounding, and the last version's tables",
    )
    .option("--grid <n>", "identities over all products with p + q <= n in either factor", "2")
    .option("--json", "every check as JSON")
    .action(async (options: AuditOptions) => (await import("./audit.js")).runAudit(options));
  return root;
}

function report(error: unknown): number {
  if (error instanceof CommanderError) return error.exitCode === 0 ? 0 : 2;
  if (error instanceof CoupletError) {
    printError(`${errorText(error.message)}\n`);
    return error.exitCode;
  }
  process.stderr.write(`couplet: this is a bug in Couplet; please report it with the command you ran.\n`);
  printError(`${error instanceof Error ? (error.stack ?? error.message) : String(error)}\n`);
  return 70;
}

function run(): void {
  if (isMainThread) {
    process.on("SIGINT", () => process.exit(130));
    // With nobody to tell, the exit code still says how it ended.
    process.stderr.on("error", () => {});
    process.stdout.on("error", (error: NodeJS.ErrnoException) => {
      // A reader such as `head` may close the pipe early; that is no error.
      if (error.code === "EPIPE") process.exit(0);
      process.stderr.write(
        `couplet: standard output: could not be written: ${error.message}. Free space, or send it elsewhere.\n`,
      );
      process.exit(2);
    });
  }
  if (isMainThread && needsOwnThread(process.argv.slice(2))) {
    runInOwnThread(__filename);
    return;
  }
  program()
    .parseAsync()
    .catch((error: unknown) => {
      process.exitCode = report(error);
    });
}

run();
