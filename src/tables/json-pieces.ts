import { canonicalJsonOf } from "./canonical-json.js";

/**
 * Canonical JSON of a message given in pieces, as text in pieces: what `canonicalJson` and an indentation of two give
 * for the whole, without ever holding it.
 *
 * @param type - full name of the message
 * @param pieces - first the fields before the lists, at least one of them set; then entries of one list in each, the
 * entries of a list one piece after another
 */
export function* jsonPieces(type: string, pieces: Iterable<object>): Generator<string> {
  const canonical = canonicalJsonOf(type);
  let open: string | undefined;
  let started = false;
  for (const piece of pieces) {
    const fields = canonical(piece) as Record<string, unknown>;
    if (!started) {
      started = true;
      // All but the brace that closes the message.
      yield JSON.stringify(fields, null, 2).slice(0, -2);
      continue;
    }
    for (const [name, entries] of Object.entries(fields)) {
      const before =
        open === name ? "," : `${open === undefined ? "" : "\n  ]"},\n  ${JSON.stringify(name)}: [`;
      open = name;
      const list = JSON.stringify({ entries }, null, 2);
      // Between the list's own brackets: its entries, indented as they are in the message.
      yield before + list.slice(list.indexOf("[") + 1, list.lastIndexOf("\n  ]"));
    }
  }
  yield `${open === undefined ? "" : "\n  ]"}\n}\n`;
}
