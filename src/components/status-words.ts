/** How each state is said on a screen, once. `tone` only colours what the words already say. */
export type Tone = 'plain' | 'good' | 'care' | 'danger' | 'over';
export interface StatusWords {
  readonly words: string;
  readonly tone: Tone;
}
const say = (words: string, tone: Tone = 'plain'): StatusWords => ({ words, tone });

export const statusWords = {
  listing: {
    draft: say('Draft'),
    open: say('Open for bids', 'good'),
    closed: say('Closed to bids', 'care'),
    matched: say('Matched', 'good'),
    done: say('Done', 'over'),
    withdrawn: say('Withdrawn', 'over'),
    lapsed: say('Lapsed', 'over'),
  },
  bid: {
    open: say('Open'),
    toConfirm: say('To confirm: the listing changed', 'care'),
    chosen: say('Chosen', 'good'),
    declined: say('Not chosen', 'over'),
    withdrawn: say('Withdrawn', 'over'),
    lapsed: say('Lapsed', 'over'),
    released: say('Released', 'over'),
  },
  booking: {
    proposed: say('Day to agree', 'care'),
    agreed: say('Day agreed, hold not paid', 'care'),
    held: say('Money held', 'good'),
    sawing: say('Sawing', 'good'),
    tallied: say('Tally to sign', 'care'),
    queried: say('Tally queried', 'care'),
    signed: say('Tally signed', 'good'),
    settled: say('Settled', 'over'),
    lapsed: say('Lapsed: not paid in time', 'over'),
    cancelled: say('Cancelled', 'over'),
  },
  trip: {
    offered: say('Waiting for answers', 'care'),
    agreed: say('Agreed by all', 'good'),
    ended: say('Ended', 'over'),
  },
  payment: {
    due: say('Due', 'care'),
    held: say('Held until the tally is signed', 'good'),
    settling: say('Being settled'),
    settled: say('Settled', 'over'),
    refunded: say('Refunded', 'over'),
    void: say('Void', 'over'),
  },
} as const satisfies Record<string, Record<string, StatusWords>>;

/** The words for a state; an unknown one is shown as it is, with spaces. */
export function wordsFor(thing: keyof typeof statusWords, status: string): StatusWords {
  const table: Readonly<Record<string, StatusWords>> = statusWords[thing];
  return table[status] ?? say(status.replaceAll('_', ' '));
}
