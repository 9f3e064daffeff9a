import { useState } from 'react';

interface ChangeBarProps {
  /** The figures that the bar watches, as text or number: when they change, the bar shows for a moment. */
  of: string | number;
}

/**
 * A bar in the margin of what has just changed, as in a revised document. It stands in the first cell of a row (or any
 * box with the class `change-bar-place`) and does not show on the first drawing.
 */
export function ChangeBar({ of }: ChangeBarProps) {
  const [seen, setSeen] = useState({ of, changes: 0 });
  // Drawn anew under another key, the bar's animation starts again without a timer.
  if (seen.of !== of) setSeen({ of, changes: seen.changes + 1 });
  return seen.changes === 0 ? null : <span key={seen.changes} className="change-bar" aria-hidden="true" />;
}
