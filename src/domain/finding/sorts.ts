/** How open listings may be ordered. */
export const listingSorts = ['distance', 'closing', 'sawBy', 'newest'] as const;
export type ListingSort = (typeof listingSorts)[number];

export const listingSortNames: Readonly<Record<ListingSort, string>> = {
  distance: 'Nearest first',
  closing: 'Closing soonest',
  sawBy: 'Saw by soonest',
  newest: 'Newest first',
};
