const TITLES: Record<string, string> = {
  dust: 'Dust',
  'wall fixing': 'Fixing to a wall',
  'tip-over': 'Tip-over',
  load: 'Load',
  children: 'Children',
  wiring: 'Wiring',
  finish: 'Finish',
  blade: 'Blades',
};

/** The heading of a caution; free subjects stand as the author wrote them, with a capital. */
export function cautionTitle(about: string): string {
  return TITLES[about] ?? about.charAt(0).toUpperCase() + about.slice(1);
}
