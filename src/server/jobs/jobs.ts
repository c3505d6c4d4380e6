import type { MailMessage } from '../services/mail.ts';

/** Every kind of job and what it carries. The migration step declares a queue for each name in `queues`. */
export interface Jobs {
  'send-mail': MailMessage;
  'process-photo': { photoId: string };
  /** A listing has come on show or changed: who asked to be told of such? */
  'match-searches': { listingId: string };
  /** A bid is new or worked out anew: what does its mill make of the cut list? */
  'plan-bid-list': { bidId: string };
  'make-provider-call': { callId: string };
  'handle-provider-event': { eventId: string };
  'wind-up-account': { accountId: string };
  /** A booking is settled: what does it say of its mill? */
  'learn-from-job': { bookingId: string };
  sweep: { which?: string };
}

/** How often a failing job is tried again, and how far apart (seconds, doubling). */
export const queues: Readonly<Record<keyof Jobs, { retryLimit: number; retryDelay: number; retryBackoff: boolean }>> = {
  'send-mail': { retryLimit: 8, retryDelay: 5, retryBackoff: true },
  'match-searches': { retryLimit: 8, retryDelay: 5, retryBackoff: true },
  'plan-bid-list': { retryLimit: 3, retryDelay: 10, retryBackoff: true },
  'process-photo': { retryLimit: 3, retryDelay: 5, retryBackoff: true },
  'make-provider-call': { retryLimit: 10, retryDelay: 2, retryBackoff: true },
  'handle-provider-event': { retryLimit: 10, retryDelay: 1, retryBackoff: true },
  'wind-up-account': { retryLimit: 8, retryDelay: 5, retryBackoff: true },
  'learn-from-job': { retryLimit: 5, retryDelay: 10, retryBackoff: true },
  sweep: { retryLimit: 0, retryDelay: 1, retryBackoff: false },
};
