/**
 * The word of `known` that is nearest to `word` by edit distance, or undefined if none is near
 * enough to be what the writer meant (more than a third of the letters differ).
 */
function nearest(word: string, known: readonly string[]): string | undefined {
  let best: string | undefined;
  let bestDistance = Infinity;
  for (const candidate of known) {
    const distance = editDistance(word.toLowerCase(), candidate.toLowerCase());
    if (distance < bestDistance) {
      best = candidate;
      bestDistance = distance;
    }
  }
  return bestDistance <= Math.max(1, Math.ceil(Math.max(word.length, best?.length ?? 0) / 3))
    ? best
    : undefined;
}

/** The hint that goes with an unknown word: the nearest known one, or all of them. */
export function suggest(word: string, known: readonly string[]): string {
  const meant = nearest(word, known);
  return meant === undefined ? `Known here: ${known.join(', ')}.` : `Did you mean ${meant}?`;
}

// Levenshtein 1966: insertions, deletions and substitutions count one each. Long words are cut:
// nobody is helped by a suggestion for a paragraph.
function editDistance(from: string, to: string): number {
  const a = from.slice(0, 64);
  const b = to.slice(0, 64);
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
