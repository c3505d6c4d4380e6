import { FORM_HOURS } from '~/domain/certificate.ts';
import { accountStates } from '~/domain/states/account.ts';
import { accountClosed } from '~/emails/account-letters.ts';
import { execute, inTransaction } from '../db.ts';
import { conflict, forbidden } from '../errors.ts';
import { enqueue } from '../jobs/queue.ts';
import { Account } from '../models/account.ts';
import { openAffairs, openAffairsWords } from '../queries/open-affairs.ts';
import { takeBack } from '../take-back.ts';
import { transition } from '../transition.ts';
import type { Viewer } from '../viewer.ts';
import { provePassword } from './change-password.ts';

/** Rows that are about the person alone. $1 is the account. */
const gone = [
  'DELETE FROM session WHERE account_id = $1',
  'DELETE FROM email_token WHERE account_id = $1',
  'DELETE FROM account_block WHERE blocker_id = $1 OR blocked_id = $1',
  'DELETE FROM certificate WHERE sawyer_id = $1',
  'DELETE FROM day_off WHERE sawyer_id = $1',
  'DELETE FROM busy_day WHERE sawyer_id = $1',
  'DELETE FROM calendar_feed WHERE sawyer_id = $1',
  'DELETE FROM other_calendar WHERE sawyer_id = $1',
  'DELETE FROM ready_message WHERE sawyer_id = $1',
  "UPDATE log SET note = '' FROM listing WHERE listing.id = log.listing_id AND owner_id = $1",
];

/** Rows that others' records need: they stay, and say nothing about the person any more. $2 is the time. */
const blanked = [
  `UPDATE sawyer_profile SET business_name = '', about = '', zip = NULL, town = NULL, base = NULL, services = '{}', languages = '{}', updated_at = $2 WHERE account_id = $1`,
  'UPDATE boards_left SET taken_down_at = coalesce(taken_down_at, $2) FROM listing WHERE listing.id = listing_id AND owner_id = $1',
  "UPDATE job_page SET landowner_agreed_at = NULL, sawyer_agreed_at = NULL, words = '', updated_at = $2 FROM booking WHERE booking.id = booking_id AND $1 IN (landowner_id, sawyer_id)",
  // The files follow once no form can send another to their place.
  `UPDATE certificate_file SET remove_after = $2::timestamptz + interval '${FORM_HOURS} hours' WHERE sawyer_id = $1 AND removed_at IS NULL`,
  'UPDATE mill SET retired_at = coalesce(retired_at, $2) WHERE sawyer_id = $1',
  "UPDATE photo SET removed_at = coalesce(removed_at, $2), caption = '', file_name = '' WHERE owner_id = $1",
  // Logs and measures stay for the other side's records of the job; where it was becomes the coarse point.
  `UPDATE listing SET typed = '{}', note = '', metal_note = '', zip = NULL, place = coarse, access = NULL, landing = NULL, waste = NULL, updated_at = $2 WHERE owner_id = $1`,
  "UPDATE bid SET message = '', updated_at = $2 WHERE sawyer_id = $1 AND message <> ''",
  "UPDATE message SET body = 'The account that wrote this is closed.', read_at = coalesce(read_at, $2) WHERE sender_id = $1",
  'UPDATE message SET read_at = coalesce(read_at, $2) WHERE recipient_id = $1',
];

/**
 * Closes one's own account: what it offers is taken back, personal data leaves, records of money and the audit log stay.
 * @throws Refusal `invalid` for a wrong password, `conflict` while bookings are live or money is open, `forbidden` for a suspended
 *   account, whose affairs a moderator looks after
 */
export async function closeAccount(by: Viewer, input: { readonly password: string }, at: Date): Promise<void> {
  await provePassword(by, input.password, 'password');
  await inTransaction(async () => {
    // Listings and bids are locked before the account, as choosing a bid does; whoever was first is seen by the check below.
    await takeBack(by.id, by, 'The account is closed', at);
    const account = await Account.findByPk(by.id, { lock: true, rejectOnEmpty: true });
    if (account.status === 'suspended') throw forbidden('This account is suspended. Write to a moderator to have it closed.');
    if (account.isModerator && (await Account.count({ where: { isModerator: true, status: 'active' } })) === 1) throw conflict('You are the only moderator. Make another one first.');
    const open = openAffairsWords(await openAffairs(by.id));
    if (open !== null) throw conflict(open);
    await enqueue('send-mail', accountClosed(account));
    for (const sql of gone) await execute(sql, [by.id]);
    for (const sql of blanked) await execute(sql, [by.id, at]);
    await transition(accountStates, 'close', account, by, at, {
      email: `closed-${by.id}@closed.invalid`, emailConfirmedAt: null, passwordHash: '', name: 'Closed account', isLandowner: false, isSawyer: false, isModerator: false,
      totpSecret: null, totpConfirmedAt: null, totpLastStep: null, zip: null, closedAt: at,
    });
  });
}
