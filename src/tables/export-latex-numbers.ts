import { roundedValue } from "./rounding.js";

type Maybe<T> = T | null | undefined;

/** A value with its errors rounded for math mode, `12.6 \pm 3.0` or `2.0^{+0.7}_{-0.5}`. */
export function latexWithErrors(value: Maybe<number>, plus: Maybe<number>, minus: Maybe<number>): string {
  const rounded = roundedValue(value ?? 0, plus ?? 0, minus ?? 0);
  if (rounded.plus === "") return latexNumber(rounded.value);
  const [text, upper, lower] = [rounded.value, rounded.plus, rounded.minus].map((part) => part.split("e")[0]);
  const errors = upper === lower ? `${text} \\pm ${upper}` : `${text}^{+${upper}}_{-${lower}}`;
  const exponent = rounded.value.split("e")[1];
  return exponent === undefined ? errors : `(${errors}) \\times 10^{${Number(exponent)}}`;
}

/** `1.4e-29` as `1.4 \times 10^{-29}`, for math mode. */
export function latexNumber(text: string): string {
  const [mantissa, exponent] = text.split("e");
  return exponent === undefined ? text : `${mantissa} \\times 10^{${Number(exponent)}}`;
}

/** Text for a comment: all on one line. */
export function latexComment(text: string): string {
  return text.replace(/\s+/g, " ");
}
