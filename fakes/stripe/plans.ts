import { expireOldSessions } from './checkout.ts';
import { openDispute } from './disputes.ts';
import { movePayout, payOutDaily } from './payouts.ts';
import { failRefund, finishRefund, payWaitingRefunds } from './refunds.ts';
import type { World } from './world.ts';

/** Does what has come due on the stand-in's clock: disputes, slow refunds, payouts, expiries. */
export function catchUp(world: World): void {
  world.store.change(() => {
    world.request = null;
    for (const plan of world.store.all('plan')) {
      if (plan.at > world.now()) continue;
      world.store.put('plan', plan.id, null);
      if (plan.deed === 'fail refund') failRefund(world, plan.subject);
      else if (plan.deed === 'finish refund') finishRefund(world, plan.subject);
      else if (plan.deed === 'move payout') movePayout(world, plan.subject);
      else {
        const charge = world.store.get('charge', plan.subject);
        if (charge !== undefined && !charge.disputed && charge.amount_refunded < charge.amount) openDispute(world, charge);
      }
    }
    expireOldSessions(world);
    payWaitingRefunds(world);
    payOutDaily(world);
  });
}
