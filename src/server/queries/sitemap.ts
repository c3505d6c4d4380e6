import { rows } from '../db.ts';
import { publicSawyerConditions } from './sawyers-near.ts';

/** The protocol's own limit is 50,000 addresses in a file; newest first, so that what is left out is the oldest. */
const most = 20_000;

/** Open listings and public sawyers, for the sitemap. Leans on `listing_open_newest`. */
export async function publicThings(at: Date): Promise<{ readonly listings: readonly number[]; readonly sawyers: readonly string[] }> {
  const listings = await rows<{ number: number }>(`SELECT number FROM listing WHERE status = 'open' AND hidden_at IS NULL AND closes_at > $1 ORDER BY published_at DESC LIMIT ${most}`, [at]);
  const sawyers = await rows<{ id: string }>(`SELECT a.id FROM sawyer_profile s JOIN account a ON a.id = s.account_id WHERE ${publicSawyerConditions} ORDER BY a.created_at DESC LIMIT ${most}`);
  return { listings: listings.map(({ number }) => number), sawyers: sawyers.map(({ id }) => id) };
}
