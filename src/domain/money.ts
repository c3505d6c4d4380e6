/** An adjustment by hand above this needs a second moderator. The database holds the same figure. */
export const FOUR_EYES_CENTS = 50_000;

/** The most that one card payment may be: eight digits of cents (the provider's published limit, from memory). A hold is one payment. */
export const MOST_HOLD_CENTS = 99_999_999;

/** Whole US cents. Negative only in the ledger. */
export type Cents = number;

/**
 * Rounds an amount in cents to whole cents, an exact half away from zero ("half up" for the positive amounts of this trade).
 * Works on the decimal text of the number, so 1.005 × 100 rounds as a person with a pencil would.
 * @throws RangeError when the amount is not finite or is beyond the safe integers.
 */
export function roundCents(amount: number): Cents {
  if (!Number.isFinite(amount) || Math.abs(amount) > 9e15) throw new RangeError('The amount is not a number of cents.');
  const magnitude = Math.floor(Number(Math.abs(amount).toPrecision(15)) + 0.5);
  return amount < 0 && magnitude !== 0 ? -magnitude : magnitude;
}

/** quantity × price in cents, rounded half up, once. */
export const times = (quantity: number, priceCents: number): Cents => roundCents(Number((quantity * priceCents).toPrecision(15)));

/** A share of an amount given in basis points (500 = 5 %), rounded half up. */
export const share = (amountCents: Cents, basisPoints: number): Cents => times(amountCents, basisPoints / 10_000);

/** `$1,234.50`; a minus sign goes before the dollar sign. */
export function formatCents(amountCents: Cents): string {
  const sign = amountCents < 0 ? '−' : '';
  const magnitude = Math.abs(amountCents);
  const dollars = Math.floor(magnitude / 100).toLocaleString('en-US');
  return `${sign}$${dollars}.${String(magnitude % 100).padStart(2, '0')}`;
}

/** `$1,235` when the cents are zero, else with cents: for estimates, where a column of `.00` is noise. */
export const formatDollars = (amountCents: Cents): string => formatCents(amountCents).replace(/\.00$/, '');

/**
 * Reads what a person types for money (`$1,250`, `1250.5`, `35`) as cents.
 * @returns null when it is not an amount with at most two decimals, or is negative or above one million dollars.
 */
export function parseCents(text: string): Cents | null {
  const match = /^\s*\$?\s*(\d{1,3}(?:,\d{3})+|\d+)?(?:\.(\d{1,2}))?\s*$/.exec(text);
  if (!match || (match[1] === undefined && match[2] === undefined)) return null;
  const dollars = Number((match[1] ?? '0').replaceAll(',', ''));
  const cents = Number((match[2] ?? '').padEnd(2, '0'));
  const total = dollars * 100 + cents;
  return total <= 100_000_000 ? total : null;
}
