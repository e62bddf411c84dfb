import { InternalError } from "../errors.js";
import { commonRoot } from "../exact/common-root.js";
import { formatRoot } from "../exact/signed-root.js";
import type { ContentTerm, PathContent, StateContent } from "../su3/content.js";
import { type Irrep, irrepDimension, irrepName } from "../su3/irrep.js";
import type { State } from "../su3/state.js";
import { fractionText, placeName } from "./labels.js";
import { textTable } from "./text-table.js";

/** Letters for the three basis states of a 3; the states of a 3bar get `bar` behind them. */
export interface Letters {
  readonly names: readonly [string, string, string];
  /** Whether the states are flavours, so that hadron names belong to them. */
  readonly flavour: boolean;
}

/** The quarks u, d, s. */
export const FLAVOURS: Letters = { names: ["u", "d", "s"], flavour: true };

/** The colours red, green, blue. */
export const COLOURS: Letters = { names: ["r", "g", "b"], flavour: false };

/** The constituents of a term in letters, e.g. `["u", "dbar"]`. */
export function constituents({ quarks }: ContentTerm, factors: readonly Irrep[], letters: Letters): string[] {
  return quarks.map((index, k) => `${letters.names[index]!}${factors[k]!.p === 1 ? "" : "bar"}`);
}

/** Every state of every path in words: `sqrt(1/2) (uud - udu)`. */
export function describeContent(
  contents: readonly PathContent[],
  factors: readonly Irrep[],
  letters: Letters,
  pathText: (content: PathContent) => string,
): string {
  const kind = letters.flavour ? "quarks" : "colours";
  const head = `\nContent in ${kind}, convention deswart-v1 (the 3bar is ${antitripletText(letters)}); states are |Y, I, I3>:\n`;
  const blocks = contents.map((content) => {
    const { irrep } = content.path;
    const rows = content.states.map((state) => [
      letters.flavour ? stateName(state.state, factors) : "",
      ketText(state.state),
      superpositionText(state, factors, letters),
    ]);
    const by = factors.length > 2 ? `, by ${pathText(content)}` : "";
    return `\n${irrepName(irrep)} (${irrepDimension(irrep) === 1 ? "one state" : `${irrepDimension(irrep)} states`})${by}\n${textTable(rows, { indent: 2 })}`;
  });
  return head + blocks.join("");
}

function antitripletText({ names: [u, d, s] }: Letters): string {
  return `${d}bar, -${u}bar; ${s}bar`;
}

/** `|Y, I, I3>`. */
function ketText({ threeY, twoI, twoI3 }: State): string {
  return `|${fractionText(threeY, 3)}, ${fractionText(twoI, 2)}, ${fractionText(twoI3, 2)}>`;
}

/** Name of the isospin multiplet where three quarks or a quark and an antiquark make it a hadron's, else empty. */
function stateName(state: State, factors: readonly Irrep[]): string {
  const quarks = factors.filter(({ p }) => p === 1).length;
  const antiquarks = factors.length - quarks;
  const role =
    quarks === 3 && antiquarks === 0 ? "first" : quarks === 1 && antiquarks === 1 ? "second" : null;
  if (role === null) return "";
  const name = placeName(state.irrep, state, role);
  return name.startsWith("(") ? "" : name;
}

/**
 * A superposition with its common root in front: `sqrt(1/6) (2 uud - udu - duu)`, or one product alone, `-d ubar`. The
 * first product in the brackets is positive; the sign of the whole state stands before them.
 */
export function superpositionText(
  { state, terms }: StateContent,
  factors: readonly Irrep[],
  letters: Letters,
): string {
  const common = commonRoot(terms.map(({ value }) => value));
  if (common === undefined) throw new InternalError(`superpositionText: no common root in ${ketText(state)}`);
  const { root, multiples } = common;
  const separator = factors.every(({ p }) => p === 1) ? "" : " ";
  const overall = multiples[0]! < 0n ? -1n : 1n;
  const sum = terms.map((term, k) => {
    const multiple = overall * multiples[k]!;
    const size = multiple < 0n ? -multiple : multiple;
    const sign = multiple < 0n ? " - " : k === 0 ? "" : " + ";
    return `${sign}${size === 1n ? "" : `${size} `}${constituents(term, factors, letters).join(separator)}`;
  });
  const isOne = root.num === root.den;
  const sign = overall < 0n ? "-" : "";
  return isOne ? `${sign}${sum.join("")}` : `${sign}${formatRoot(root)} (${sum.join("")})`;
}
