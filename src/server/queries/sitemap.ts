import { rows } from '../db.ts';
import { publicSawyerConditions } from './sawyers-near.ts';

/** The protocol's own limit is 50,000 addresses in a file; newest first, so that what is left out is the oldest. */
const most = 20_000;

/** Open listings, public sawyers and jobs that both sides show around, for the sitemap. Leans on `listing_open_newest`. */
export async function publicThings(at: Date): Promise<{ readonly listings: readonly number[]; readonly sawyers: readonly string[]; readonly jobs: readonly number[] }> {
  const listings = await rows<{ number: number }>(`SELECT number FROM listing WHERE status = 'open' AND hidden_at IS NULL AND closes_at > $1 ORDER BY published_at DESC LIMIT ${most}`, [at]);
  const sawyers = await rows<{ id: string }>(`SELECT a.id FROM sawyer_profile s JOIN account a ON a.id = s.account_id WHERE ${publicSawyerConditions} ORDER BY a.created_at DESC LIMIT ${most}`);
  const jobs = await rows<{ number: number }>(
    `SELECT b.number FROM job_page p JOIN booking b ON b.id = p.booking_id JOIN listing l ON l.id = b.listing_id JOIN account o ON o.id = b.landowner_id JOIN account s ON s.id = b.sawyer_id
     WHERE p.landowner_agreed_at IS NOT NULL AND p.sawyer_agreed_at IS NOT NULL AND b.status = 'settled' AND l.hidden_at IS NULL AND o.status = 'active' AND s.status = 'active'
     ORDER BY p.updated_at DESC LIMIT ${most}`,
  );
  return { listings: listings.map(({ number }) => number), sawyers: sawyers.map(({ id }) => id), jobs: jobs.map(({ number }) => number) };
}
