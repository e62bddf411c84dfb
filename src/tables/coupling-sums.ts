import { equalRoots, ONE_ROOT, type SignedRoot } from "../exact/signed-root.js";
import { couplet } from "../gen/couplet.js";
import { rootOfExact } from "./exact-message.js";

import v1 = couplet.v1;

type Maybe<T> = T | null | undefined;

/** How the parts of a coupling are written: for a terminal, or for a typesetter. */
export interface SumStyle {
  /** A positive factor other than 1, with what parts it from the name behind it. */
  readonly factor: (size: SignedRoot) => string;
  /** A reduced coupling, D, F or a hadron. */
  readonly name: (name: string) => string;
  /** A mixing weight > 0 other than 1, in front of its sum in brackets. */
  readonly weight: (size: number) => string;
}

/** The coupling in reduced couplings: `sqrt(9/20) g(8_1) + 1/2 g(8_2)`; `0` for an exact zero, empty where not defined. */
export function formText(
  row: v1.Coupling.$Properties,
  field: "coefficient" | "matrixCoefficient",
  style: SumStyle,
): string {
  if (field === "matrixCoefficient" && row.matrixValue == null) return "";
  return weighted(row, style, ({ terms }) =>
    sumText(
      (terms ?? []).map((term) => [term[field], term.reduced ?? ""]),
      style,
    ),
  );
}

/** The same in D and F; empty where a component has none. */
export function dAndFText(
  row: v1.Coupling.$Properties,
  field: "dAndF" | "matrixDAndF",
  style: SumStyle,
): string {
  if (!(row.components ?? []).every((component) => component[field] != null)) return "";
  return weighted(row, style, ({ [field]: form }) => dAndFSum(form, style));
}

/** `-D + sqrt(3) F`. */
export function dAndFSum(form: Maybe<v1.DAndF.$Properties>, style: SumStyle): string {
  return sumText(
    [
      [form?.d, "D"],
      [form?.f, "F"],
    ],
    style,
  );
}

/** A sum of exact multiples of names, without those that are zero; `0` if all are. */
export function sumText(
  parts: readonly (readonly [Maybe<v1.Exact.$Properties>, string])[],
  style: SumStyle,
): string {
  return joined(
    parts.flatMap(([exact, name]) => {
      const root = rootOfExact(exact);
      if (root.sign === 0) return [];
      const size = { ...root, sign: 1 as const };
      const factor = equalRoots(size, ONE_ROOT) ? "" : style.factor(size);
      return [{ negative: root.sign < 0, text: `${factor}${style.name(name)}` }];
    }),
  );
}

/** The texts of a row's components, each times its mixing weight where that is not 1. */
function weighted(
  { components }: v1.Coupling.$Properties,
  style: SumStyle,
  text: (component: v1.CouplingComponent.$Properties) => string,
): string {
  return joined(
    (components ?? []).map((component) => {
      const weight = component.weight ?? 1;
      if (weight === 1) return { negative: false, text: text(component) };
      return { negative: weight < 0, text: `${style.weight(Math.abs(weight))}(${text(component)})` };
    }),
  );
}

function joined(parts: readonly { readonly negative: boolean; readonly text: string }[]): string {
  const texts = parts.map(({ negative, text }, k) => {
    const sign = k === 0 ? (negative ? "-" : "") : negative ? " - " : " + ";
    return `${sign}${text}`;
  });
  return texts.length === 0 ? "0" : texts.join("");
}
