import { distance } from "fastest-levenshtein";

/**
 * The candidates closest to a name, nearest first: by edit distance without regard to case, ties in their own order.
 *
 * For messages that refuse an unknown name. Candidates farther than half the length of the name are left out.
 */
export function nearestNames(name: string, candidates: readonly string[], count = 3): string[] {
  const wanted = name.toLowerCase();
  return candidates
    .map((candidate) => ({ candidate, letters: distance(wanted, candidate.toLowerCase()) }))
    .filter(({ letters }) => letters <= Math.max(2, name.length / 2))
    .sort((a, b) => a.letters - b.letters)
    .slice(0, count)
    .map(({ candidate }) => candidate);
}
