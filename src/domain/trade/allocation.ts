import type { Cents } from '~/domain/money.ts';

/** A charge of a booking and what of it is neither refunded nor promised yet, in the order they were received. */
export interface ChargeLeft {
  readonly id: string;
  readonly leftCents: Cents;
}

export interface Portion {
  readonly chargeId: string;
  readonly amountCents: Cents;
}

/**
 * Says which charge each cent of a settlement comes from: refunds from the newest charge backwards (a top-up goes back before the
 * hold), the transfer from the oldest forwards. No charge gives more than it has left; the portions sum to what was asked.
 * @throws RangeError when the charges together have less than transfer and refund
 */
export function allocate(charges: readonly ChargeLeft[], transferCents: Cents, refundCents: Cents): { readonly transfers: Portion[]; readonly refunds: Portion[] } {
  const left = new Map(charges.map(({ id, leftCents }) => [id, leftCents]));
  const take = (order: readonly ChargeLeft[], wanted: Cents): Portion[] => {
    let rest = wanted;
    const portions: Portion[] = [];
    for (const { id } of order) {
      const amountCents = Math.min(rest, left.get(id) ?? 0);
      if (amountCents <= 0) continue;
      left.set(id, (left.get(id) ?? 0) - amountCents);
      rest -= amountCents;
      portions.push({ chargeId: id, amountCents });
    }
    if (rest > 0) throw new RangeError(`The charges are ${rest} cents short of what was to be paid from them.`);
    return portions;
  };
  const refunds = take([...charges].reverse(), refundCents);
  return { refunds, transfers: take(charges, transferCents) };
}
