/** A final state as a study writes it: `N(1520)+ -> p gamma`, or `f1(1285) -> K*(892) Kbar + c.c.`. */
export interface WrittenMode {
  readonly parent: string;
  readonly daughters: readonly string[];
  /** True with `+ c.c.`: the charge conjugate final state is meant as well. */
  readonly withConjugate: boolean;
}

const MODE = /^\s*(\S+)\s*->\s*(\S.*?)\s*(\+\s*c\.\s?c\.)?\s*$/;

/** The names in a written final state of two daughters or more, or undefined if the text is none. */
export function parseMode(text: string): WrittenMode | undefined {
  const [, parent, rest, conjugate] = MODE.exec(text) ?? [];
  const daughters = rest?.split(/\s+/) ?? [];
  if (parent === undefined || daughters.length < 2) return undefined;
  return { parent, daughters, withConjugate: conjugate !== undefined };
}
