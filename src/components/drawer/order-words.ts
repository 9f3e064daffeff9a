/** The state of an order in words. */
export const orderStateWords = {
  pending: 'not paid yet',
  paid: 'paid',
  partly_refunded: 'refunded in part',
  refunded: 'refunded',
  expired: 'ran out unpaid',
  failed: 'not paid',
} as const;

/** A licence kind in words. */
export const licenceWords = { personal: 'Personal licence', workshop: 'Workshop licence' } as const;

/** The state of a licence in words. */
export const licenceStateWords = { active: 'active', refunded: 'ended by refund', revoked: 'ended' } as const;
