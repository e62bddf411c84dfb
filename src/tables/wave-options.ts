import { TableError } from "../errors.js";
import type { couplet } from "../gen/couplet.js";
import type { WidthModelChoice } from "../model/model.js";
import { widthModelDefinitions } from "../widths/width-model.js";
import type { WidthModelDefinition, WidthModelOptions } from "../widths/width-model-definition.js";

type OptionMessage = couplet.v1.Option.$Properties;

/**
 * The options of a width model with unit and value, as tables have them.
 *
 * An option that joined its model later is left out at the value that tables without it mean, so that such a table is
 * the same as before and older readers know it.
 */
export function optionMessages({ id, options }: WidthModelChoice): OptionMessage[] {
  const definition = widthModelDefinitions().find((model) => model.id === id)!;
  return definition.options
    .filter(({ name, absent }) => options[name] !== absent)
    .map(({ name, unit }) => ({ name, unit, value: options[name]! }));
}

/**
 * The values of a model's options from a table, by name.
 *
 * Strict: a model with a constant of unknown meaning is another model. Only an option that joined its model later may be
 * missing, and then has the value that tables without it mean. Values are not checked here; a missing one is NaN.
 *
 * @param where - the row, for the message
 * @throws TableError for a missing or unknown option, one in another unit or one that stands there twice
 */
export function optionValues(
  where: string,
  { id, options }: WidthModelDefinition,
  given: readonly OptionMessage[],
): WidthModelOptions {
  const textOf = ({ name, unit }: OptionMessage) => `${name} in ${unit}`;
  const texts = given.map(textOf);
  const known = options.map(textOf);
  const hasAll = options.every((option) => option.absent !== undefined || texts.includes(textOf(option)));
  if (!hasAll || !texts.every((text) => known.includes(text)) || new Set(texts).size < texts.length) {
    const wanted = options.map((option) => textOf(option) + (option.absent === undefined ? "" : " or none"));
    throw new TableError(
      `${where}: expected width model ${id} with the options [${wanted.join(", ")}], got [${texts.join(", ")}]. Read the table with a newer version of Couplet.`,
    );
  }
  const absent = options.flatMap(({ name, absent }) =>
    absent === undefined ? [] : [[name, absent] as const],
  );
  const values = given.map(({ name, value }) => [name, value ?? Number.NaN] as const);
  return Object.fromEntries([...absent, ...values]);
}
