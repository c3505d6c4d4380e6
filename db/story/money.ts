import { addHours } from '../../src/domain/time.ts';
import { handleProviderEvent } from '../../src/server/commands/handle-provider-event.ts';
import { makeProviderCall } from '../../src/server/commands/make-provider-call.ts';
import { startCheckout } from '../../src/server/commands/start-checkout.ts';
import { rows } from '../../src/server/db.ts';
import { env } from '../../src/server/env.ts';
import type { Viewer } from '../../src/server/viewer.ts';

/** Turns one of the stand-in's switches. */
export async function standIn(what: string, body: object): Promise<void> {
  const answer = await fetch(`${env().PAYMENTS_URL}/_control/${what}`, { method: 'POST', headers: { 'content-type': 'application/json' }, body: JSON.stringify(body) });
  if (!answer.ok) throw new Error(`The payment stand-in refused ${what}: ${answer.status} ${await answer.text()}`);
}

/** Waits until the provider's messages have arrived at the web process, and does at this time what the worker would do with them. */
export async function handleMoney(at: Date): Promise<void> {
  for (;;) {
    const calls = await rows<{ id: string }>(
      `SELECT call.id FROM provider_call call JOIN booking ON booking.id = call.booking_id LEFT JOIN sawyer_profile ON sawyer_profile.account_id = booking.sawyer_id
       WHERE call.status IN ('waiting', 'failed') AND (call.kind <> 'transfer' OR sawyer_profile.payouts_ready) ORDER BY call.created_at`,
    );
    for (const { id } of calls) await makeProviderCall(id, at);
    if (calls.length > 0) await standIn('quiet', {});
    const messages = await rows<{ id: string }>('SELECT id FROM provider_event WHERE handled_at IS NULL ORDER BY received_at, id');
    for (const { id } of messages) await handleProviderEvent(id, at);
    if (calls.length + messages.length === 0) return;
  }
}

/** The landowner pays on the provider's card page, and the signed message that follows is taken in. */
export async function pay(by: Viewer, booking: number, at: Date): Promise<void> {
  const page = await startCheckout(by, { booking, cardPageUntil: addHours(new Date(), 1) }, at);
  const card = { email: by.email, cardNumber: '4242 4242 4242 4242', cardExpiry: '12 / 49', cardCvc: '123', billingName: by.name, billingPostalCode: '54665' };
  const answer = await fetch(page, { method: 'POST', redirect: 'manual', body: new URLSearchParams(card) });
  if (answer.status !== 303 && answer.status !== 302) throw new Error(`The card page did not take the payment for booking ${booking}: ${answer.status}`);
  await standIn('quiet', {});
  await handleMoney(at);
}
