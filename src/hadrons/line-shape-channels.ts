import { catalogueMultiplet } from "./catalogue-multiplet.js";
import data from "./data/line-shapes.json";
import type { Member } from "./multiplet.js";

/** Two-body decays that give an unstable ground state its mass distribution, by isospin. */
export interface LineShapeChannels {
  readonly L: number;
  readonly channels: readonly {
    readonly daughters: readonly [Member, Member];
    /** Relative size; only ratios count. */
    readonly fraction: number;
  }[];
}

/**
 * The decays of an unstable ground state by the name of its isospin multiplet; undefined for what has none here.
 *
 * @example lineShapeChannels("Delta(1232)")!.channels[0]!.daughters.map(({ name }) => name) // ["N", "pi"]
 */
export function lineShapeChannels(member: string): LineShapeChannels | undefined {
  const found = data.members.find(({ name }) => name === member);
  if (found === undefined) return undefined;
  const members = ["baryon-octet", "pseudoscalar-octet"].flatMap((id) => catalogueMultiplet(id).members);
  const named = (name: string | undefined) => members.find((candidate) => candidate.name === name)!;
  return {
    L: found.L,
    channels: found.channels.map(({ daughters, fraction }) => ({
      daughters: [named(daughters[0]), named(daughters[1])],
      fraction,
    })),
  };
}
