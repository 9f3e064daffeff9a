import type { BarPattern } from './bar-columns.ts';
import type { BarModel } from './bar-model.ts';
import { createLateAcceptance } from './late-acceptance.ts';
import { createRandom } from './random.ts';

/** One bar in the making: by clear stretch, what is left of it and the kinds cut from it. */
interface Bar {
  stock: number;
  left: number[];
  parts: number[][];
}

export interface FoundBars {
  bars: BarPattern[];
  /** Kinds without a place, one entry each. */
  out: number[];
  cost: number;
  steps: number;
}

export interface BarSearchOptions {
  seed: number;
  /** Steps that may be spent, counted from `spent`. */
  steps: number;
  shouldStop: () => boolean;
  /** Cost at which the search for a cheaper layout ends. */
  lowerBound: number;
  onFound: (found: FoundBars) => void;
  onGathered: (found: FoundBars) => void;
}

const HISTORY = 300;
const BLINK = 0.02;
const MOST_BARS = 3;
const MOST_PARTS = 8;
const WHOLE_BAR = 0.15;
const SCATTER = 0.02;
const STEPS_PER_LOOK = 16;
const SLICE = 1000;
const GATHER_EVERY = 10;
const GATHER_PATIENCE = 3000;

/**
 * Ruin and recreate for bars, as for sheets: the goal is set below the cheapest layout known. Starts from first-fit answers,
 * or from `start` where the columns gave a better one.
 */
export function createBarSearch(model: BarModel, options: BarSearchOptions) {
  const random = createRandom(options.seed);
  const { size, cost: price, count, room } = model;
  const longest = Math.max(1, ...room.flat());
  const everything = model.wanted.flatMap((n, kind) => new Array<number>(n).fill(kind));

  let bars: Bar[] = [];
  let out: number[] = [];
  let cost = 0;
  let limit = Infinity;
  let used = price.map(() => 0);
  let best: FoundBars = { bars: [], out: everything, cost: 0, steps: 0 };
  let hasFirst = false;
  let steps = 0;
  let isStopped = false;

  function mayGoOn(): boolean {
    if (isStopped || steps >= options.steps) return false;
    if (steps % STEPS_PER_LOOK === 0 && options.shouldStop()) isStopped = true;
    return !isStopped;
  }

  const lengthOf = (kinds: readonly number[]) => kinds.reduce((sum, kind) => sum + (size[kind] as number), 0);
  const isEmpty = (bar: Bar) => bar.parts.every((parts) => parts.length === 0);

  function open(stock: number): Bar {
    const bar = {
      stock,
      left: (room[stock] as number[]).slice(),
      parts: (room[stock] as number[]).map(() => []),
    };
    bars.push(bar);
    used[stock] = (used[stock] as number) + 1;
    cost += price[stock] as number;
    return bar;
  }

  function load(patterns: readonly BarPattern[], unplaced: readonly number[]): void {
    bars = [];
    used = price.map(() => 0);
    cost = 0;
    out = unplaced.slice();
    for (const pattern of patterns) {
      const bar = open(pattern.stock);
      pattern.take.forEach((take, stretch) => {
        take.forEach((n, kind) => {
          for (let k = 0; k < n; k++) (bar.parts[stretch] as number[]).push(kind);
          bar.left[stretch] = (bar.left[stretch] as number) - n * (size[kind] as number);
        });
      });
    }
    for (let s = 0; s < price.length; s++)
      if ((price[s] as number) === 0) while ((used[s] as number) < (count[s] as number)) open(s);
  }

  /** Opens a bar that holds the kind and keeps the limit: the cheapest for its length in a first answer, else at random. */
  function buy(kind: number, isRandom: boolean): Bar | null {
    let chosen = -1;
    let seen = 0;
    let least = Infinity;
    for (let s = 0; s < price.length; s++) {
      if (
        (used[s] as number) >= (count[s] as number) ||
        cost + (price[s] as number) > limit ||
        !(room[s] as number[]).some((r) => r >= (size[kind] as number))
      )
        continue;
      seen++;
      const dear = (price[s] as number) / (room[s] as number[]).reduce((a, b) => a + b, 0);
      if (isRandom ? random() * seen < 1 : dear < least) {
        chosen = s;
        least = dear;
      }
    }
    return chosen < 0 ? null : open(chosen);
  }

  /** Puts each kind of `out` where least is left beside it. */
  function recreate(blink: number): void {
    const still: number[] = [];
    let failed = -1;
    for (const kind of out) {
      if (kind === failed) {
        still.push(kind);
        continue;
      }
      const need = size[kind] as number;
      let at: Bar | null = null;
      let where = 0;
      let least = Infinity;
      for (const bar of bars) {
        for (let s = 0; s < bar.left.length; s++) {
          const rest = (bar.left[s] as number) - need;
          if (rest >= 0 && rest < least && !(blink > 0 && random() < blink)) {
            at = bar;
            where = s;
            least = rest;
          }
        }
      }
      if (!at) {
        at = buy(kind, blink > 0);
        where = at ? at.left.findIndex((left) => left >= need) : 0;
      }
      if (at) {
        at.left[where] = (at.left[where] as number) - need;
        (at.parts[where] as number[]).push(kind);
      } else {
        failed = kind;
        still.push(kind);
      }
    }
    out = still;
  }

  function snapshot(): FoundBars {
    const patterns = bars
      .filter((bar) => !isEmpty(bar))
      .map((bar) => ({
        stock: bar.stock,
        take: bar.parts.map((parts) => {
          const take = size.map(() => 0);
          for (const kind of parts) take[kind] = (take[kind] as number) + 1;
          return take;
        }),
      }));
    return {
      bars: patterns,
      out: out.slice(),
      cost: patterns.reduce((sum, p) => sum + (price[p.stock] as number), 0),
      steps,
    };
  }

  /** Keeps and reports the state when it places more than the best, or costs less. */
  function offer(): boolean {
    const found = snapshot();
    const longer = lengthOf(found.out) - lengthOf(best.out);
    if (hasFirst && (longer > 0 || (longer === 0 && found.cost >= best.cost))) return false;
    hasFirst = true;
    best = found;
    options.onFound(found);
    return true;
  }

  function scatter(): number {
    let sum = 0;
    for (const bar of bars) for (const left of bar.left) sum += (left / longest) ** 2;
    return sum;
  }

  /** One ruin: some parts out of up to three bars. The bars changed are replaced, so that the old ones can come back. */
  function ruin(): void {
    if (bars.length === 0) return;
    bars = bars.slice();
    const many = 1 + Math.floor(random() * MOST_BARS);
    for (let r = 0; r < many; r++) {
      const at = Math.floor(random() * bars.length);
      const old = bars[at] as Bar;
      const bar = {
        stock: old.stock,
        left: old.left.slice(),
        parts: old.parts.map((parts) => parts.slice()),
      };
      bars[at] = bar;
      const isWhole = random() < WHOLE_BAR;
      const most = isWhole ? Infinity : 1 + Math.floor((random() * MOST_PARTS) / many);
      for (let k = 0; k < most && !isEmpty(bar); k++) {
        let s = Math.floor(random() * bar.parts.length);
        while ((bar.parts[s] as number[]).length === 0) s = (s + 1) % bar.parts.length;
        const [kind] = (bar.parts[s] as number[]).splice(
          Math.floor(random() * (bar.parts[s] as number[]).length),
          1,
        ) as [number];
        bar.left[s] = (bar.left[s] as number) + (size[kind] as number);
        out.push(kind);
      }
      // An emptied bar that was bought may be changed for another.
      if (isWhole && (price[bar.stock] as number) > 0) {
        bars.splice(at, 1);
        used[bar.stock] = (used[bar.stock] as number) - 1;
        cost -= price[bar.stock] as number;
        if (bars.length === 0) return;
      }
    }
    // Recreating changes whichever bar it likes: all are copied, they are small.
    bars = bars.map((bar) => ({
      stock: bar.stock,
      left: bar.left.slice(),
      parts: bar.parts.map((parts) => parts.slice()),
    }));
  }

  function climb(
    until: number,
    value: () => number,
    acceptance: ReturnType<typeof createLateAcceptance>,
    onTaken: () => boolean,
  ): void {
    while (steps < until && mayGoOn()) {
      steps++;
      const before = { bars, out: out.slice(), cost, used: used.slice() };
      ruin();
      if (random() < 0.8) out.sort((a, b) => a - b);
      else {
        const key = new Map(out.map((kind) => [kind, random()]));
        out.sort((a, b) => (key.get(a) as number) - (key.get(b) as number));
      }
      recreate(BLINK);
      const now = value();
      if (now < Infinity && acceptance.accepts(now)) {
        if (onTaken()) return;
      } else ({ bars, out, cost, used } = before);
    }
  }

  const isLeast = () => hasFirst && best.out.length === 0 && best.cost <= options.lowerBound;

  function aimLower(): void {
    load(best.bars, best.out);
    limit = Infinity;
    if (best.out.length > 0) return;
    const paid = price.filter((p) => p > 0);
    limit = best.cost - (paid.every(Number.isInteger) ? 1 : best.cost * 1e-9);
    while (cost > limit) {
      const paidBars = bars.filter((bar) => (price[bar.stock] as number) > 0);
      const bar = paidBars.reduce((a, b) => (lengthOf(b.parts.flat()) < lengthOf(a.parts.flat()) ? b : a));
      bars = bars.filter((b) => b !== bar);
      used[bar.stock] = (used[bar.stock] as number) - 1;
      cost -= price[bar.stock] as number;
      out.push(...bar.parts.flat());
    }
  }

  const reducing = createLateAcceptance(HISTORY);
  const gathering = createLateAcceptance(HISTORY);
  const shortfall = () => lengthOf(out) / longest - SCATTER * scatter();

  /** Looks for cheaper layouts until one is found or `until` steps are spent. */
  function reduce(until: number): void {
    aimLower();
    reducing.start(shortfall());
    while (steps < until && mayGoOn() && !isLeast()) {
      climb(until, shortfall, reducing, () => (best.out.length > 0 || out.length === 0) && offer());
      if (steps < until) {
        aimLower();
        reducing.start(shortfall());
      }
    }
  }

  let gathered = 0;
  let gatheredFrom: FoundBars | null = null;
  let gatheredAt = 0;
  let kept: FoundBars = best;
  /** Keeps the cost and brings what is left over together in few long pieces. */
  function gather(until: number): void {
    const isNew = gatheredFrom !== best;
    if (isNew) kept = best;
    load(kept.bars, kept.out);
    limit = best.cost;
    if (isNew) {
      gatheredFrom = best;
      gathered = scatter();
      gatheredAt = steps;
    }
    gathering.start(-scatter());
    climb(
      until,
      () => (out.length === 0 ? -scatter() : Infinity),
      gathering,
      () => {
        const now = scatter();
        if (now <= gathered || snapshot().cost > best.cost) return false;
        gathered = now;
        gatheredAt = steps;
        kept = snapshot();
        options.onGathered(kept);
        return false;
      },
    );
  }

  return {
    /** First answers: longest first into the tightest place, nothing opened before it must be. */
    start(): void {
      load([], everything);
      recreate(0);
      offer();
    },
    /** Takes a layout made elsewhere, filling in by itself what that leaves out. */
    take(patterns: readonly BarPattern[]): void {
      const left = model.wanted.slice();
      for (const p of patterns)
        for (const take of p.take) take.forEach((n, kind) => (left[kind] = (left[kind] as number) - n));
      limit = Infinity;
      load(
        patterns,
        left.flatMap((n, kind) => new Array<number>(n).fill(kind)),
      );
      recreate(0);
      offer();
    },
    isLeast,
    /** Searches until the steps are spent or the caller says stop. */
    run(): void {
      for (let slice = 1; mayGoOn() && everything.length > 0; slice++) {
        if (isLeast() && gatheredFrom === best && steps - gatheredAt > GATHER_PATIENCE) return;
        if (best.out.length === 0 && (isLeast() || slice % GATHER_EVERY === 0)) gather(steps + SLICE);
        else reduce(steps + SLICE);
      }
    },
  };
}
