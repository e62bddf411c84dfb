/**
 * A value and its error rounded for people: with the three highest digits of the error between 100 and 354 it keeps two
 * digits, between 355 and 949 one, above that it is rounded up to 1000 and keeps two; the value follows.
 *
 * Source: Particle Data Group, Review of Particle Physics, introduction, "Rounding". Provenance: memory.
 * @returns e.g. `-0.240 +- 0.033`, or `7.493e-25 +- 0.003e-25` below 1e-4 and from 1e7 on; without an error (0 or not
 * finite) four significant digits
 */
export function withError(value: number, error: number): string {
  const rounded = roundedValue(value, error, error);
  return rounded.plus === "" ? rounded.value : `${rounded.value} +- ${rounded.plus}`;
}

/** A value with its upper and lower error, rounded as `withError`; the smaller error decides. */
export interface RoundedValue {
  readonly value: string;
  /** Empty without errors. */
  readonly plus: string;
  readonly minus: string;
}

/** A value and two errors rounded by the same rule, as parts for a typesetter; in exponent form all have one exponent. */
export function roundedValue(value: number, plus: number, minus: number): RoundedValue {
  const errors = [plus, minus].filter((error) => isError(value, error));
  if (errors.length === 0) return { value: significant(value, 4), plus: "", minus: "" };
  const largest = Math.max(Math.abs(value), ...errors);
  const exponent = needsExponent(largest) ? Math.floor(Math.log10(largest)) : 0;
  const unit = 10 ** exponent;
  const decimals = errorDecimals(Math.min(...errors) / unit);
  const text = (x: number) => `${fixed(x / unit, decimals)}${exponent === 0 ? "" : `e${exponent}`}`;
  return { value: text(value), plus: text(plus), minus: text(minus) };
}

/** An error lost in the digits of a double is none. */
function isError(value: number, error: number): boolean {
  return error > 1e-12 * Math.abs(value) && Number.isFinite(error);
}

/** A measurement with the digits its author gave, `20.4 +- 3.6` or `58 +4 -3`; noise of unit conversion drops out. */
export function asGiven(value: number, plus: number, minus: number): string {
  const text = (x: number) => String(Number(x.toPrecision(12)));
  if (plus === 0 && minus === 0) return text(value);
  return plus === minus ? `${text(value)} +- ${text(plus)}` : `${text(value)} +${text(plus)} -${text(minus)}`;
}

/** A number with a given count of significant digits, never in exponent form between 1e-4 and 1e7. */
export function significant(value: number, digits: number): string {
  if (value === 0) return "0";
  const size = Math.abs(value);
  if (needsExponent(size)) return value.toExponential(digits - 1);
  return fixed(value, Math.max(0, digits - 1 - Math.floor(Math.log10(size))));
}

function needsExponent(size: number): boolean {
  return size < 1e-4 || size >= 1e7;
}

/** Decimal places the error keeps; negative where it is rounded to tens or more. */
function errorDecimals(error: number): number {
  const exponent = Math.floor(Math.log10(error));
  const leading = Math.round(error / 10 ** (exponent - 2));
  return leading <= 354 ? 1 - exponent : -exponent;
}

function fixed(value: number, decimals: number): string {
  // A small negative value rounds to zero, which has no sign.
  if (decimals >= 0) return value.toFixed(Math.min(decimals, 100)).replace(/^-(?=[0.]+$)/, "");
  const unit = 10 ** -decimals;
  return String(Math.round(value / unit) * unit);
}
