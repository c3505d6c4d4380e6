import { authorize } from '../authorize.ts';
import { unavailable } from '../errors.ts';
import { PaymentsProblem } from '../services/payments.ts';
import { record } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';
import { reconcile } from './reconcile.ts';

/** A moderator has the ledger compared with the provider's books now. @throws Refusal `unavailable` when the provider does not answer */
export async function reconcileByHand(by: Viewer, at: Date): Promise<void> {
  authorize(by, 'desk', 'reconcile', baseRoles(by));
  await record(by, 'reconcile', 'desk', null, at);
  await reconcile(at).catch((error: unknown) => {
    if (error instanceof PaymentsProblem) throw unavailable('The payment provider does not answer just now. Try again in a moment.');
    throw error;
  });
}
