/** The hint that goes with an unknown word: the nearest known one, or all of them. */
export const suggest = (word: string, known: readonly string[]): string =>
  suggestNear(word, known) ?? `Known here: ${known.join(', ')}.`;

/** The nearest known word as a hint, if there is one near enough. */
export function suggestNear(word: string, known: readonly string[]): string | undefined {
  const meant = nearest(word, known);
  return meant === undefined ? undefined : `Did you mean ${meant}?`;
}

/**
 * The word of `known` that is nearest to `word`: by edit distance, if no more than a third of the
 * letters differ; else the first one that `word` begins, as `alpha_isc` begins
 * `alpha_isc_pct_per_K`.
 */
function nearest(word: string, known: readonly string[]): string | undefined {
  const meant = word.slice(0, LONGEST_WORD).toLowerCase();
  let best: string | undefined;
  let bestDistance = Infinity;
  for (const candidate of known) {
    const distance = editDistance(meant, candidate.slice(0, LONGEST_WORD).toLowerCase());
    if (distance < bestDistance) {
      best = candidate;
      bestDistance = distance;
    }
  }
  const longest = Math.max(meant.length, Math.min(best?.length ?? 0, LONGEST_WORD));
  if (bestDistance <= Math.max(1, Math.ceil(longest / 3))) return best;
  if (meant.length < SHORTEST_START) return undefined;
  return known.find((candidate) => candidate.toLowerCase().startsWith(meant));
}

// Nobody is helped by a suggestion for a paragraph, or for two letters.
const LONGEST_WORD = 64;
const SHORTEST_START = 3;

// Levenshtein 1966: insertions, deletions and substitutions count one each.
function editDistance(a: string, b: string): number {
  let previous = Array.from({ length: b.length + 1 }, (_, column) => column);
  for (let row = 1; row <= a.length; row++) {
    const current = [row];
    for (let column = 1; column <= b.length; column++) {
      const substitution = previous[column - 1]! + (a[row - 1] === b[column - 1] ? 0 : 1);
      current.push(Math.min(substitution, previous[column]! + 1, current[column - 1]! + 1));
    }
    previous = current;
  }
  return previous[b.length]!;
}
