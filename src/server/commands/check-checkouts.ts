import { Op } from 'sequelize';
import { Checkout } from '../models/money.ts';
import { readCheckout } from '../services/card-payments.ts';
import { receiveCheckout } from './receive-checkout.ts';

/**
 * Asks the provider about checkouts that were opened before `openedBefore` and of which nothing was heard: a message may have been
 * lost. One that was never known to open is given up when its time is over.
 */
export async function checkOpenCheckouts(at: Date, openedBefore: Date): Promise<void> {
  const open = await Checkout.findAll({ where: { status: ['creating', 'open'], createdAt: { [Op.lt]: openedBefore } }, order: [['createdAt', 'ASC']], limit: 100 });
  for (const checkout of open) {
    if (checkout.providerSessionId !== null) await receiveCheckout(await readCheckout(checkout.providerSessionId), at);
    else if (checkout.expiresAt <= at) await Checkout.update({ status: 'expired' }, { where: { id: checkout.id, status: 'creating' } });
  }
}
