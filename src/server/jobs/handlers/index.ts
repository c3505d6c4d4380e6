import { now } from '../../clock.ts';
import { handleProviderEvent } from '../../commands/handle-provider-event.ts';
import { learnFromJob } from '../../commands/learn-from-job.ts';
import { makeProviderCall } from '../../commands/make-provider-call.ts';
import { matchSearches } from '../../commands/match-searches.ts';
import { planBidList } from '../../commands/plan-bid-list.ts';
import { windUpAccount } from '../../commands/wind-up-account.ts';
import type { Jobs } from '../jobs.ts';
import { sendMail } from '../../services/mail.ts';
import { processPhoto } from './process-photo.ts';
import { sweep } from './sweep.ts';

/** What the worker does with each kind of job. A handler may run twice and must then change nothing twice. */
export const handlers: { readonly [Name in keyof Jobs]?: (payload: Jobs[Name]) => Promise<void> } = {
  'send-mail': sendMail,
  'process-photo': processPhoto,
  'match-searches': async ({ listingId }) => matchSearches(listingId, now()),
  'plan-bid-list': async ({ bidId }) => planBidList(bidId),
  'make-provider-call': async ({ callId }) => makeProviderCall(callId, now()),
  'handle-provider-event': async ({ eventId }) => handleProviderEvent(eventId, now()),
  'wind-up-account': async ({ accountId }) => void (await windUpAccount(accountId, now())),
  'learn-from-job': async ({ bookingId }) => learnFromJob(bookingId),
  sweep: async () => sweep(),
};
