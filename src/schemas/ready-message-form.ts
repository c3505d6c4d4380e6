import { z } from 'zod';
import { fieldOf, text } from './fields.ts';

/** At most this many messages are kept ready by one sawyer. */
export const MOST_READY_MESSAGES = 30;

/** A message kept ready for bids. Without `id` a new one. */
export const readyMessageForm = z.object({
  id: fieldOf(text(36)),
  name: fieldOf(text(60, 'Give it a name you will know it by.')),
  body: fieldOf(text(2_000, 'Write the message.')),
});
export type ReadyMessageForm = z.output<typeof readyMessageForm>;
