/** What closes to bids within so many hours is closing soon. */
export const CLOSING_HOURS = 7 * 24;

/** How open listings may be ordered. */
export const listingSorts = ['distance', 'closing', 'sawBy', 'newest'] as const;
export type ListingSort = (typeof listingSorts)[number];

export const listingSortNames: Readonly<Record<ListingSort, string>> = {
  distance: 'Nearest first',
  closing: 'Closing soonest',
  sawBy: 'Saw by soonest',
  newest: 'Newest first',
};

/** How the page of logs may be ordered for a sawyer: as above, or by what a job brings for each hour on the road and at work. */
export const logsPageSorts = [...listingSorts, 'perHour'] as const;
export type LogsPageSort = (typeof logsPageSorts)[number];

export const logsPageSortNames: Readonly<Record<LogsPageSort, string>> = { ...listingSortNames, perHour: 'Most money an hour' };
