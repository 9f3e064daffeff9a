/** Nodes of the search tree after which the bound is taken for the value. */
const MAX_NODES = 100_000;

/**
 * The most valuable filling of a length: `take[i]` pieces of kind i, at most `most[i]`. Exact by branch and bound in the order
 * of value per length (after Martello and Toth 1990); `bound` is an upper bound, equal to `value` unless the search was cut short.
 */
export function fillLength(
  room: number,
  size: readonly number[],
  value: readonly number[],
  most: readonly number[],
): { take: number[]; value: number; bound: number } {
  const order = size
    .map((_, i) => i)
    .filter((i) => (value[i] as number) > 1e-12 && (most[i] as number) > 0 && (size[i] as number) <= room);
  order.sort(
    (a, b) =>
      (value[b] as number) / (size[b] as number) - (value[a] as number) / (size[a] as number) || a - b,
  );
  const n = order.length;
  const s = order.map((i) => size[i] as number);
  const v = order.map((i) => value[i] as number);
  const m = order.map((i) => most[i] as number);
  // The shortest of the kinds from each place on: below it nothing more goes in.
  const shortest = new Array<number>(n + 1).fill(Infinity);
  for (let i = n - 1; i >= 0; i--) shortest[i] = Math.min(s[i] as number, shortest[i + 1] as number);
  const now = new Array<number>(n).fill(0);
  let best = 0;
  let bestTake = now.slice();
  let nodes = 0;

  function relaxed(at: number, left: number): number {
    let sum = 0;
    for (let i = at; i < n; i++) {
      const whole = (m[i] as number) * (s[i] as number);
      if (whole >= left) return sum + (left * (v[i] as number)) / (s[i] as number);
      sum += (m[i] as number) * (v[i] as number);
      left -= whole;
    }
    return sum;
  }

  function branch(at: number, left: number, sum: number): void {
    nodes++;
    if (sum > best + 1e-12) {
      best = sum;
      bestTake = now.slice();
    }
    if (at === n || left < (shortest[at] as number) || nodes > MAX_NODES) return;
    if (sum + relaxed(at, left) <= best + 1e-12) return;
    for (let k = Math.min(m[at] as number, Math.floor(left / (s[at] as number))); k >= 0; k--) {
      now[at] = k;
      // With fewer of this kind the rest is worth no more than its relaxation.
      if (sum + k * (v[at] as number) + relaxed(at + 1, left - k * (s[at] as number)) > best + 1e-12) {
        branch(at + 1, left - k * (s[at] as number), sum + k * (v[at] as number));
      }
    }
    now[at] = 0;
  }

  const bound = relaxed(0, room);
  branch(0, room, 0);
  const take = size.map(() => 0);
  order.forEach((i, q) => {
    take[i] = bestTake[q] as number;
  });
  return { take, value: best, bound: nodes > MAX_NODES ? bound : best };
}
