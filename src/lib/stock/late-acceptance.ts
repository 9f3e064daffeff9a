/** Accepts a value that is no worse than the last one or than the one some steps ago (Burke and Bykov 2017). Lower is better. */
export interface LateAcceptance {
  start: (value: number) => void;
  accepts: (value: number) => boolean;
  /** The last value measured anew, after what is measured has changed. */
  renew: (value: number) => void;
}

/** Creates an acceptance that looks `length` steps back. */
export function createLateAcceptance(length: number): LateAcceptance {
  const history = new Float64Array(length);
  let current = Infinity;
  let at = 0;
  return {
    start(value) {
      current = value;
      history.fill(value);
      at = 0;
    },
    renew(value) {
      current = value;
    },
    accepts(value) {
      const isTaken = value <= current || value <= (history[at] as number);
      if (isTaken) current = value;
      if (current < (history[at] as number)) history[at] = current;
      at = at + 1 === length ? 0 : at + 1;
      return isTaken;
    },
  };
}
