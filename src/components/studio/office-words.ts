/** The state of an imprint in words. */
export const imprintStateWords = {
  applied: 'waits to be admitted',
  active: 'admitted',
  suspended: 'suspended',
} as const;

/** What somebody is in an imprint. */
export const roleWords = { owner: 'owner', editor: 'editor', bookkeeper: 'bookkeeper' } as const;
