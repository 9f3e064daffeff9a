/** What happened, in words, as the sales book and the statement say it. */
export const movementWords = {
  sale: 'sale',
  refund: 'refund',
  dispute: 'disputed payment',
  payout: 'paid out',
  adjustment: 'adjustment',
} as const;
