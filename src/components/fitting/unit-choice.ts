import { useSyncExternalStore } from 'react';
import type { UnitSystem } from '#lib/plan/types.ts';

/**
 * The reader's units on this page, shared by its islands: the switch stands in the title block, the figures elsewhere.
 * Null until somebody switches; the page's own choice holds till then.
 */
let chosen: UnitSystem | null = null;
const listeners = new Set<() => void>();

/** Switches the units everywhere on the page, and for the pages after it by the cookie that the server reads. */
export function chooseUnits(units: UnitSystem): void {
  chosen = units;
  document.cookie = `benchleaf_units=${units}; path=/; max-age=31536000; samesite=lax`;
  for (const listener of listeners) listener();
}

function subscribe(listener: () => void): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}

/** The units to show now; `initial` is what the server rendered. */
export function useUnits(initial: UnitSystem): UnitSystem {
  return useSyncExternalStore(
    subscribe,
    () => chosen ?? initial,
    () => initial,
  );
}
