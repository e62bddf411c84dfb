import type { Hadron } from "../hadrons/hadron.js";
import { leptonNumber } from "../hadrons/light-particles.js";
import { finalStateKey } from "./final-states.js";

/** What must be the same before and after a decay, by its word. */
const CONSERVED: readonly (readonly [string, (hadron: Hadron) => number, "always" | "not weak"])[] = [
  ["charge", ({ charge }) => charge, "always"],
  ["baryon number", ({ baryonNumber }) => baryonNumber, "always"],
  ["lepton number", ({ name }) => leptonNumber(name), "always"],
  ["strangeness", ({ strangeness }) => strangeness, "not weak"],
  ["charm", ({ charm }) => charm, "not weak"],
];

/** A quantity that a decay does not conserve, in words, or undefined. */
export function broken(parent: Hadron, daughters: readonly Hadron[], weak: boolean): string | undefined {
  // K_S0 and K_L0 have no strangeness of their own: a row with one of them may stand for either flavour.
  const flavourless = [parent, ...daughters].filter(({ name }) => isNeutralKaonState(name)).length;
  for (const [word, of, when] of CONSERVED) {
    if (weak && when === "not weak") continue;
    const before = of(parent);
    const after = daughters.reduce((sum, daughter) => sum + of(daughter), 0);
    const slack = word === "strangeness" ? flavourless : 0;
    if (Math.abs(before - after) > slack || (slack > 0 && (before - after - slack) % 2 !== 0))
      return `${word}, ${before} before and ${after} after`;
  }
  return undefined;
}

/** True for K_S0 and K_L0. */
export function isNeutralKaonState(name: string): boolean {
  return name === "K_S0" || name === "K_L0";
}

/**
 * The C parity a decay breaks, in words, or undefined: where parent and all daughters are their own antiparticles with a
 * known C parity, the product of the daughters' must be the parent's.
 */
export function brokenCParity(parent: Hadron, daughters: readonly Hadron[]): string | undefined {
  const own = daughters.map(({ cParity, antiparticle }) => (antiparticle === null ? cParity : null));
  if (parent.antiparticle !== null || parent.cParity === null || own.some((c) => c === null))
    return undefined;
  const product = own.reduce<number>((sign, c) => sign * c!, 1);
  return product === parent.cParity ? undefined : `C parity, ${parent.cParity} before and ${product} after`;
}

/**
 * The final states of a parent that is its own antiparticle whose charge conjugate is not among them.
 *
 * @returns those that lack it, each with the names of its conjugate; empty for a parent with an antiparticle
 */
export function withoutConjugate<T extends { readonly daughters: readonly Hadron[] }>(
  parent: Hadron,
  finals: readonly T[],
): { final: T; conjugate: string }[] {
  if (parent.antiparticle !== null) return [];
  const present = new Set(finals.map(({ daughters }) => finalStateKey(daughters)));
  return finals.flatMap((final) => {
    const images = final.daughters.map(({ name, antiparticle }) => ({ name: antiparticle ?? name }));
    if (present.has(finalStateKey(images))) return [];
    return [{ final, conjugate: images.map(({ name }) => name).join(" ") }];
  });
}
