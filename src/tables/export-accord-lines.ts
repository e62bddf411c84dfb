/**
 * Lines of the open Les Houches accord on decay tables, in its fixed columns; numbers in GeV or pure.
 *
 * Source: P. Skands et al., JHEP 07 (2004) 036, arXiv:hep-ph/0311123, section 3 and appendix (provenance: memory); the
 * formats are quoted in Fortran's way beside each function.
 */

/** The largest number the nine columns of an id hold. */
export const LARGEST_ID = 999_999_999;

/** `('DECAY',1x,I9,3x,1P,E16.8,0P,3x,'#',1x,A)`: a particle and its total width. */
export function decayLine(id: number, widthGeV: number, comment: string): string {
  return `DECAY ${integer(id, 9)}   ${real(widthGeV)}   # ${comment}`;
}

/** `(3x,1P,E16.8,0P,3x,I2,3x,N(I9,1x),2x,'#',1x,A)`: a branching fraction and the daughters. */
export function modeLine(fraction: number, ids: readonly number[], comment: string): string {
  const daughters = ids.map((id) => `${integer(id, 9)} `).join("");
  return `   ${real(fraction)}   ${integer(ids.length, 2)}   ${daughters}  # ${comment}`;
}

/** `(1x,I9,3x,1P,E16.8,0P,3x,'#',1x,A)`: an entry of `BLOCK MASS`. */
export function massLine(id: number, massGeV: number, comment: string): string {
  return ` ${integer(id, 9)}   ${real(massGeV)}   # ${comment}`;
}

/** `(1x,I5,3x,A)`: an entry of `BLOCK DCINFO`; 1 is the program, 2 its version, 3 a warning. */
export function infoLine(index: number, text: string): string {
  return ` ${integer(index, 5)}   ${text}`;
}

function integer(value: number, columns: number): string {
  return String(value).padStart(columns);
}

/** `1P,E16.8`: one digit before the point, eight behind it; an exponent of three digits takes the place of the E. */
function real(value: number): string {
  const [mantissa, exponent] = value.toExponential(8).split("e") as [string, string];
  const [sign, digits] = [exponent[0]!, exponent.slice(1)];
  const power = digits.length > 2 ? sign + digits : `E${sign}${digits.padStart(2, "0")}`;
  return `${mantissa}${power}`.padStart(16);
}
