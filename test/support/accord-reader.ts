/** A mode as read: fraction and daughters. */
export interface AccordMode {
  readonly fraction: number;
  /** The fraction as written, for exact sums. */
  readonly written: string;
  readonly ids: readonly number[];
}

/** Text of the Les Houches accord as read: masses and decay tables by id, in GeV. */
export interface AccordText {
  readonly massesGeV: ReadonlyMap<number, number>;
  readonly decays: ReadonlyMap<number, { readonly widthGeV: number; readonly modes: readonly AccordMode[] }>;
}

const REAL = /^[+-]?(\d+\.?\d*|\.\d+)([EeDd][+-]?\d+)?$/;
const INTEGER = /^[+-]?\d+$/;

/**
 * A reader of blocks MASS and DECAY, written from the accord's grammar and not from our writer.
 *
 * Lines are `# comment`, blank, `BLOCK name`, `DECAY id width`, or start with a blank: data of a block, or, after a
 * DECAY line, `fraction count id id ...` with exactly as many ids. Everything behind `#` is comment.
 * Source: P. Skands et al., JHEP 07 (2004) 036, arXiv:hep-ph/0311123, section 3 (provenance: memory).
 * @throws Error for a line outside the grammar, or a second DECAY of an id
 */
export function readAccord(text: string): AccordText {
  const massesGeV = new Map<number, number>();
  const decays = new Map<number, { widthGeV: number; modes: AccordMode[] }>();
  let block: string | undefined;
  let modes: AccordMode[] | undefined;
  for (const [k, line] of text.split("\n").entries()) {
    const fail = (why: string): never => {
      throw new Error(`line ${k + 1}: ${why}: ${line}`);
    };
    if (line.includes("\t")) fail("a tab");
    const words = line
      .replace(/#.*/, "")
      .split(/ +/)
      .filter((word) => word !== "");
    if (words.length === 0) continue;
    if (/^block /i.test(line)) {
      block = words[1]!.toUpperCase();
      modes = undefined;
    } else if (/^decay /i.test(line)) {
      if (words.length !== 3 || !INTEGER.test(words[1]!) || !REAL.test(words[2]!)) fail("no DECAY line");
      const id = Number(words[1]);
      if (decays.has(id)) fail("a second table");
      modes = [];
      decays.set(id, { widthGeV: real(words[2]!), modes });
    } else if (!line.startsWith(" ")) fail("no keyword");
    else if (modes !== undefined) modes.push(modeOf(words) ?? fail("no mode"));
    else if (block === "MASS") {
      if (words.length !== 2 || !INTEGER.test(words[0]!) || !REAL.test(words[1]!)) fail("no mass");
      massesGeV.set(Number(words[0]), real(words[1]!));
    } else if (block === undefined) fail("data outside a block");
  }
  return { massesGeV, decays };
}

function modeOf([written, count, ...ids]: readonly string[]): AccordMode | undefined {
  const sound = REAL.test(written!) && INTEGER.test(count ?? "") && ids.every((id) => INTEGER.test(id));
  if (!sound || ids.length !== Number(count) || ids.length < 2) return undefined;
  return { fraction: real(written!), written: written!, ids: ids.map(Number) };
}

function real(text: string): number {
  return Number(text.replace(/[Dd]/, "e"));
}

/** The exact sum of decimals written as `d.ddddddddE-dd`, in units of 10^-20. */
export function exactSum(decimals: readonly string[]): bigint {
  return decimals.reduce((sum, text) => {
    const [mantissa, exponent] = text.split("E") as [string, string];
    const digits = BigInt(mantissa.replace(".", ""));
    return sum + digits * 10n ** BigInt(20 - 8 + Number(exponent));
  }, 0n);
}
