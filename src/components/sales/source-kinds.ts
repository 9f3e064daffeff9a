/** The kinds of place that a tracked link can stand in. */
export const sourceKinds = [
  { value: 'video', label: 'Video' },
  { value: 'page', label: 'Page' },
  { value: 'newsletter', label: 'Letter' },
  { value: 'talk', label: 'Talk or course' },
  { value: 'other', label: 'Other' },
] as const;
