import type { RateCard as Card } from '~/domain/trade/rate-card.ts';
import { RateCard } from '~/server/models/sawyer.ts';
import { authorize } from '../authorize.ts';
import { inTransaction, lockFor } from '../db.ts';
import { record } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

/**
 * Keeps a new revision of the sawyer's rate card. Earlier revisions stay; bids keep the copy they froze.
 * @returns the revision
 */
export async function saveRateCard(by: Viewer, card: Card, at: Date): Promise<number> {
  authorize(by, 'sawyer', 'keepRates', baseRoles(by));
  return inTransaction(async () => {
    await lockFor('rate-card', by.id);
    const latest = (await RateCard.max<number | null, RateCard>('revision', { where: { sawyerId: by.id } })) ?? 0;
    await RateCard.create({ sawyerId: by.id, revision: latest + 1, card, createdAt: at });
    await record(by, 'saveRateCard', 'rateCard', by.id, at, { data: { revision: latest + 1 } });
    return latest + 1;
  });
}
