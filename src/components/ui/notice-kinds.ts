/** What a notice says: that something holds, that care is needed, that something is wrong, or only something to know. */
export type NoticeKind = 'holds' | 'caution' | 'error' | 'note';

/** The word that stands over a notice when its writer gives no title, so that its kind never hangs on colour alone. */
export const noticeTitles: Record<NoticeKind, string> = {
  holds: 'It holds',
  caution: 'Caution',
  error: 'Not in order',
  note: 'Note',
};

/** Signs of the kinds, drawn in a square of 20: outline, and strokes upon it. */
export const noticeSigns: Record<NoticeKind, { outline: string; strokes: string }> = {
  holds: { outline: 'M1 1h18v18H1z', strokes: 'M5 10.5 8.7 14.2 15.2 6' },
  caution: { outline: 'M10 1.4 19.2 18.2H.8z', strokes: 'M10 7v5.6M10 14.6v1.6' },
  error: { outline: 'M1 1h18v18H1z', strokes: 'M5.5 5.5l9 9M14.5 5.5l-9 9' },
  note: { outline: 'M1 1h18v18H1z', strokes: 'M10 5v1.6M10 8.6V15' },
};
