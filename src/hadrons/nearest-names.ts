/**
 * The candidates closest to a name, nearest first: by edit distance without regard to case, ties in their own order.
 *
 * For messages that refuse an unknown name. Candidates farther than half the length of the name are left out.
 */
export function nearestNames(name: string, candidates: readonly string[], count = 3): string[] {
  const wanted = name.toLowerCase();
  return candidates
    .map((candidate) => ({ candidate, distance: editDistance(wanted, candidate.toLowerCase()) }))
    .filter(({ distance }) => distance <= Math.max(2, name.length / 2))
    .sort((a, b) => a.distance - b.distance)
    .slice(0, count)
    .map(({ candidate }) => candidate);
}

/**
 * Least number of letters to insert, delete or replace to turn one text into the other.
 *
 * Source: V. I. Levenshtein, Soviet Physics Doklady 10 (1966) 707 (provenance: memory).
 */
export function editDistance(from: string, to: string): number {
  let row = Array.from({ length: to.length + 1 }, (_, column) => column);
  for (let i = 1; i <= from.length; i++) {
    const next = [i];
    for (let j = 1; j <= to.length; j++) {
      const replaced = row[j - 1]! + (from[i - 1] === to[j - 1] ? 0 : 1);
      next.push(Math.min(replaced, row[j]! + 1, next[j - 1]! + 1));
    }
    row = next;
  }
  return row[to.length]!;
}
