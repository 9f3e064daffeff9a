/** Names longer than this are not compared, so that a hostile one costs nothing. */
const MAX_COMPARED = 40;

/**
 * Edit distance with neighbouring swaps (optimal string alignment, after Damerau 1964), case ignored.
 * Gives Infinity as soon as the distance must exceed `limit`.
 */
function editDistance(a: string, b: string, limit: number): number {
  if (Math.abs(a.length - b.length) > limit) return Infinity;
  let before: number[] = [];
  let last = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i += 1) {
    const row = [i];
    for (let j = 1; j <= b.length; j += 1) {
      const same = a[i - 1] === b[j - 1] ? 0 : 1;
      let best = Math.min((last[j] ?? 0) + 1, (row[j - 1] ?? 0) + 1, (last[j - 1] ?? 0) + same);
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1])
        best = Math.min(best, (before[j - 2] ?? 0) + 1);
      row.push(best);
    }
    if (Math.min(...row) > limit) return Infinity;
    before = last;
    last = row;
  }
  return last[b.length] ?? Infinity;
}

/** The candidate that was probably meant, or undefined when nothing is near: at most one slip in four letters, two in all. */
export function suggestName(written: string, candidates: Iterable<string>): string | undefined {
  if (written.length > MAX_COMPARED) return undefined;
  const wanted = written.toLowerCase();
  const limit = wanted.length < 3 ? 1 : wanted.length < 6 ? 1 : 2;
  let best: string | undefined;
  let least = Infinity;
  for (const candidate of candidates) {
    if (candidate.length > MAX_COMPARED) continue;
    const distance = editDistance(wanted, candidate.toLowerCase(), limit);
    // A one-letter name is near to everything; only its other case is a likely slip.
    if (Math.max(wanted.length, candidate.length) < 3 && distance > 0) continue;
    if (distance <= limit && distance < least) {
      best = candidate;
      least = distance;
    }
  }
  return best;
}
