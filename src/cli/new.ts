import { lstatSync } from "node:fs";
import { basename } from "node:path";
import { InputError } from "../errors.js";
import { refuse } from "../require.js";
import { studyJsonSchema } from "../study/json-schema.js";
import { writeWhole } from "../tables/whole-file.js";
import { print } from "./print.js";
import { starterStudy } from "./starter-study.js";

/**
 * `couplet new`: writes a starter study, and beside it the JSON Schema that lets an editor complete and check its keys.
 *
 * @param name - a path without or with `.yaml`
 * @param options - `schema`: only the schema, in place of an older one
 * @throws InputError if one of the files is there already
 */
export function runNew(name: string, options: { schema?: true }): void {
  const stem = name.replace(/\.ya?ml$/, "");
  const title = basename(stem);
  // The name becomes part of comments and of a command line to copy.
  if (!/^[\p{L}\p{N}_][\p{L}\p{N}_.+-]*$/u.test(title) || name.endsWith("/")) {
    refuse("couplet new", "a name of letters, digits and any of _ . + -", name);
  }
  const study = `${stem}.yaml`;
  const schema = `${stem}.schema.json`;
  const schemaText = `${JSON.stringify(studyJsonSchema(), null, 2)}\n`;
  if (options.schema) {
    writeWhole(schema, schemaText);
    print(`wrote ${schema}, a JSON Schema of study files for editors\n`);
    return;
  }
  for (const file of [study, schema]) requireAbsent(file);
  writeWhole(schema, schemaText);
  writeWhole(study, starterStudy(title, basename(schema)));
  print(
    `wrote ${study}, a study to make your own: every number in it is invented\n` +
      `wrote ${schema}, from which editors complete and check its keys\n` +
      `\nTry next:\n  couplet fit ${study}\n  couplet tables ${study} -o ${title}-tables\n`,
  );
}

function requireAbsent(file: string): void {
  if (lstatSync(file, { throwIfNoEntry: false }) === undefined) return;
  throw new InputError(
    `${file}: expected no file there yet, got one. It stays as it is; choose another name.`,
  );
}
