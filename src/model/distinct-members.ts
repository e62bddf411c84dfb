import type { Member } from "../hadrons/multiplet.js";
import type { Problems } from "./problems.js";
import type { MixedStates } from "./resolve-mixing.js";
import type { StudyBoundMultiplet } from "./resolve-multiplets.js";

/** An isospin multiplet of a study, with the path where it is written. */
interface Written {
  readonly path: string;
  readonly member: Member;
  readonly isMixed: boolean;
}

/**
 * Notes hadrons of a study whose name another one of it has.
 *
 * A mixed state may have the name of the unmixed member whose place it takes.
 */
export function noteRepeatedNames(
  own: ReadonlyMap<string, StudyBoundMultiplet>,
  groups: readonly MixedStates[],
  problems: Problems,
): void {
  const written: Written[] = [
    ...[...own].flatMap(([id, { multiplet }]) =>
      multiplet.members.map((member, k) => ({
        path: `multiplets/${id}/members/${k}`,
        member,
        isMixed: false,
      })),
    ),
    ...groups.flatMap(({ path, members }) =>
      members.map((member, k) => ({ path: `${path}/states/${k}`, member, isMixed: true })),
    ),
  ];
  for (const [k, one] of written.entries()) {
    const other = written.slice(0, k).find((earlier) => clash(earlier, one));
    if (other === undefined) continue;
    const { line } = problems.positionOf(other.path);
    problems.add(
      one.path,
      `${one.member.name}: expected a name that no other hadron of this study has, got that of line ${line}. Give one of the two another.`,
    );
  }
}

function clash(a: Written, b: Written): boolean {
  const names = new Set([a.member.name, ...a.member.hadrons.map(({ name }) => name)]);
  if (![b.member.name, ...b.member.hadrons.map(({ name }) => name)].some((name) => names.has(name)))
    return false;
  const samePlace = a.member.threeY === b.member.threeY && a.member.twoI === b.member.twoI;
  return a.isMixed === b.isMixed || !samePlace;
}
