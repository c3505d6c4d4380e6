import { ProviderCall, ProviderEvent } from '../models/money.ts';
import { findReversal, readCheckout, readDispute, readRefund } from '../services/card-payments.ts';
import { readPayoutAccount } from '../services/payments.ts';
import { finishProviderCall } from './finish-provider-call.ts';
import { noteDispute } from './note-dispute.ts';
import { notePayoutAccount } from './payout-account.ts';
import { receiveCheckout } from './receive-checkout.ts';

interface Subject {
  readonly id: string;
  readonly metadata: Readonly<Record<string, string>>;
}

function subjectOf(payload: unknown): Subject {
  const object = (payload as { data?: { object?: { id?: unknown; metadata?: unknown } } } | null)?.data?.object;
  if (typeof object?.id !== 'string') throw new Error('The event has no object with an id.');
  return { id: object.id, metadata: (object.metadata ?? {}) as Record<string, string> };
}

/** A call of ours that the provider's object names or is known by. */
async function callOf({ id, metadata }: Subject): Promise<ProviderCall | null> {
  const known = await ProviderCall.findOne({ where: { providerId: id } });
  if (known) return known;
  const call = metadata['call'];
  return call !== undefined && /^[0-9a-f-]{36}$/.test(call) ? ProviderCall.findByPk(call) : null;
}

/**
 * Does what a message asks for. The message only says where to look: the object is read anew from the provider, so that messages
 * may come late, twice and in any order.
 */
async function outcomeOf(event: ProviderEvent, at: Date): Promise<string> {
  const subject = subjectOf(event.payload);
  switch (event.type) {
    case 'checkout.session.completed':
    case 'checkout.session.async_payment_succeeded':
    case 'checkout.session.expired':
      return receiveCheckout(await readCheckout(subject.id), at);
    case 'refund.created':
    case 'refund.updated':
    case 'refund.failed':
    case 'charge.refund.updated': {
      const call = await callOf(subject);
      if (!call) return 'not ours';
      await finishProviderCall(call.id, await readRefund(subject.id), at);
      return 'noted';
    }
    case 'transfer.created': {
      const call = await callOf(subject);
      if (!call) return 'not ours';
      await finishProviderCall(call.id, { providerId: subject.id, status: 'moved' }, at);
      return 'noted';
    }
    case 'transfer.reversed': {
      const transfer = await ProviderCall.findOne({ where: { providerId: subject.id, kind: 'transfer' } });
      const call = transfer && (await ProviderCall.findOne({ where: { reverses: transfer.id } }));
      const made = call && (await findReversal(subject.id, call.id));
      if (!made) return 'not ours';
      await finishProviderCall(call.id, made, at);
      return 'noted';
    }
    case 'charge.dispute.created':
    case 'charge.dispute.updated':
    case 'charge.dispute.closed':
    case 'charge.dispute.funds_withdrawn':
    case 'charge.dispute.funds_reinstated':
      return noteDispute(await readDispute(subject.id), at);
    case 'account.updated':
      return notePayoutAccount(await readPayoutAccount(subject.id), at);
    default:
      return 'nothing to do';
  }
}

/** Handles a recorded message once; throws to be tried again when the provider does not answer. */
export async function handleProviderEvent(eventId: string, at: Date): Promise<void> {
  const event = await ProviderEvent.findByPk(eventId);
  if (!event || event.handledAt) return;
  const outcome = await outcomeOf(event, at);
  await event.update({ handledAt: at, outcome });
}

