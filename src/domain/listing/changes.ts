/** What a listing says to those who bid on it, in the parts that can change. Values only: compared by what they hold. */
export interface ListingParts {
  readonly logs: unknown;
  readonly 'cut list': unknown;
  readonly access: unknown;
  readonly 'metal risk': unknown;
  readonly place: unknown;
  readonly landing: unknown;
  readonly 'slabs and sawdust': unknown;
  readonly 'how it came down': unknown;
  readonly 'closing date': unknown;
  readonly 'notes': unknown;
}

export type Part = keyof ListingParts;

/**
 * The parts a bid is worked out on: when one changes, the listing gets a new revision and open bids have to be confirmed. The place is
 * among them because the travel in a bid is counted to it.
 */
export const bindingParts: readonly Part[] = ['logs', 'cut list', 'access', 'metal risk', 'place'];

/** Text that is the same for the same content, whatever the order of its keys (the database does not keep it). */
const plain = (value: unknown): string =>
  JSON.stringify(value, (_, inner: unknown) =>
    typeof inner === 'object' && inner !== null && !Array.isArray(inner) ? Object.fromEntries(Object.entries(inner).sort(([a], [b]) => (a < b ? -1 : 1))) : inner,
  );

/** The parts whose content differs, in the order above. */
export const changedParts = (before: ListingParts, after: ListingParts): readonly Part[] =>
  (Object.keys(after) as Part[]).filter((part) => plain(before[part]) !== plain(after[part]));

/** Whether a change asks for a new revision. */
export const isBinding = (changed: readonly Part[]): boolean => changed.some((part) => bindingParts.includes(part));
