import { rows } from '../db.ts';
import type { Viewer } from '../viewer.ts';

/** What of each table is a person's own, by the account's id ($1). Secrets (hashes, the sealed second factor) are not data about a person. */
const parts: Readonly<Record<string, string>> = {
  account: `SELECT id, email, email_confirmed_at, name, is_landowner, is_sawyer, is_moderator, status, suspended_reason, zip, terms_version, terms_accepted_at,
    totp_confirmed_at AS second_factor_since, created_at FROM account WHERE id = $1`,
  termsAccepted: 'SELECT version, accepted_at FROM terms_acceptance WHERE account_id = $1',
  sessions: 'SELECT public_id AS id, created_at, last_seen_at, expires_at, user_agent FROM session WHERE account_id = $1',
  blocked: 'SELECT blocked_id AS account, created_at FROM account_block WHERE blocker_id = $1',
  listings: `SELECT number, status, revision, typed, title, tree_owner, how_down, came_down_on, ends_sealed, zip, town, state, time_zone,
    ST_Y(place::geometry) AS lat, ST_X(place::geometry) AS lng, access, landing, waste, metal_risk, metal_note, note, closes_at, saw_by, created_at, published_at FROM listing WHERE owner_id = $1`,
  logs: 'SELECT listing.number AS listing, log.position, log.label, log.species, small_end_in, large_end_in, length_ft, heart_defect_in, defects, log.note FROM log JOIN listing ON listing.id = listing_id WHERE owner_id = $1',
  cutList: 'SELECT listing.number AS listing, piece.position, label, thickness_in, width_in, length_ft, count, sizing, kind, for_dwelling FROM piece JOIN listing ON listing.id = listing_id WHERE owner_id = $1',
  photographs: 'SELECT photo.id, listing.number AS listing, photo.sawyer_id IS NOT NULL AS of_own_work, photo.position, caption, file_name, photo.status, width, height, photo.created_at, removed_at FROM photo LEFT JOIN listing ON listing.id = listing_id WHERE photo.owner_id = $1',
  sawyerProfile: `SELECT business_name, about, zip, town, state, time_zone, ST_Y(base::geometry) AS base_lat, ST_X(base::geometry) AS base_lng, travel_miles, services, languages,
    lumber_credential, working_days, notice_days, payout_account, payouts_ready FROM sawyer_profile WHERE account_id = $1`,
  certificates: 'SELECT kind, sent_at, says_until, seen_at, expires_on FROM certificate WHERE sawyer_id = $1',
  daysOff: 'SELECT day FROM day_off WHERE sawyer_id = $1',
  busyDays: 'SELECT day, brought_by, calendar, given_back_at FROM busy_day WHERE sawyer_id = $1',
  readyMessages: 'SELECT name, body, created_at, updated_at FROM ready_message WHERE sawyer_id = $1',
  calendarFeed: 'SELECT made_at FROM calendar_feed WHERE sawyer_id = $1',
  otherCalendar: 'SELECT host, least_hours, made_at, read_at FROM other_calendar WHERE sawyer_id = $1',
  mills: 'SELECT * FROM mill WHERE sawyer_id = $1',
  rateCards: 'SELECT revision, card, created_at FROM rate_card WHERE sawyer_id = $1',
  savedSearches: 'SELECT name, tells, zip, radius_mi, species, min_board_feet, max_largest_end_in, closing, fits, min_per_hour_cents, created_at FROM saved_search WHERE sawyer_id = $1',
  bids: `SELECT listing.number AS listing, bid.listing_revision, bid.status, mill, card, estimate, road_miles, expected_cents, hold_cents, metal_cap_cents, off_bearer, days_offered, message,
    bid.created_at, bid.updated_at FROM bid JOIN listing ON listing.id = listing_id WHERE sawyer_id = $1`,
  sharedTrips: `SELECT number, status, day, start_time, time_zone, miles, alone_miles, whole_cents, alone_cents, answer_by, ended_because, created_at FROM shared_trip WHERE sawyer_id = $1`,
  sharedTripStops: `SELECT trip.number AS trip, trip.day, listing.number AS listing, CASE WHEN stop.landowner_id = $1 THEN 'landowner' ELSE 'sawyer' END AS as, stop.status, stop.position, alone_travel_cents, travel_cents,
    set_up_cents, alone_cost_cents, cost_cents, hold_cents, answered_at, out_because FROM trip_stop stop JOIN shared_trip trip ON trip.id = stop.trip_id JOIN listing ON listing.id = stop.listing_id
    WHERE stop.landowner_id = $1 OR trip.sawyer_id = $1 ORDER BY trip.number, stop.position`,
  bookings: `SELECT booking.number, listing.number AS listing, CASE WHEN landowner_id = $1 THEN 'landowner' ELSE 'sawyer' END AS as, booking.status, booking.time_zone, starts_at, pay_by, sign_by,
    booking.created_at FROM booking JOIN listing ON listing.id = listing_id WHERE landowner_id = $1 OR sawyer_id = $1`,
  agreements: 'SELECT booking.number AS booking, terms, frozen_at FROM work_agreement JOIN booking ON booking.id = booking_id WHERE landowner_id = $1 OR sawyer_id = $1',
  tallies: `SELECT booking.number AS booking, to_jsonb(tally) - 'id' - 'booking_id' AS tally FROM tally JOIN booking ON booking.id = booking_id WHERE landowner_id = $1 OR sawyer_id = $1`,
  heldPayments: 'SELECT booking.number AS booking, held_payment.status, due_cents, held_payment.created_at FROM held_payment JOIN booking ON booking.id = booking_id WHERE landowner_id = $1 OR sawyer_id = $1',
  ledger: `SELECT booking.number AS booking, ledger_group.at, ledger_group.cause, account, amount_cents FROM ledger_entry JOIN ledger_group ON ledger_group.id = group_id
    JOIN booking ON booking.id = ledger_entry.booking_id WHERE landowner_id = $1 OR sawyer_id = $1`,
  messages: `SELECT conversation_id AS conversation, CASE WHEN sender_id = $1 THEN 'sent' ELSE 'received' END AS way, body, sent_at, read_at FROM message
    WHERE (sender_id = $1 OR recipient_id = $1) AND hidden_at IS NULL`,
  drying: `SELECT booking.number AS booking, months, air_source, target_pct, stack_width_ft, saw_kerf_in, pieces, remind_on, (SELECT coalesce(json_agg(json_build_object('readOn', read_on, 'moisturePct', moisture_pct, 'note', note) ORDER BY read_on), '[]') FROM moisture_reading WHERE booking_id = booking.id) AS readings
    FROM booking JOIN drying_plan ON drying_plan.booking_id = booking.id WHERE landowner_id = $1`,
  boardsLeftOver: 'SELECT booking.number AS booking, boards, asks, put_up_at, taken_down_at FROM boards_left JOIN booking ON booking.id = booking_id WHERE landowner_id = $1',
  jobPages: "SELECT booking.number AS booking, words, photo_ids, CASE WHEN landowner_id = $1 THEN landowner_agreed_at ELSE sawyer_agreed_at END AS agreed_at FROM job_page JOIN booking ON booking.id = booking_id WHERE landowner_id = $1 OR sawyer_id = $1",
  reviewsWritten: 'SELECT booking.number AS booking, stars, body, review.created_at FROM review JOIN booking ON booking.id = booking_id WHERE author_id = $1',
  reviewsReceived: 'SELECT booking.number AS booking, stars, body, review.created_at FROM review JOIN booking ON booking.id = booking_id WHERE subject_id = $1 AND hidden_at IS NULL',
  reports: 'SELECT thing, thing_id, reason, note, created_at, handled_at, outcome FROM report WHERE reporter_id = $1',
  deeds: 'SELECT at, action, thing, thing_id, from_status, to_status FROM event WHERE actor_id = $1 ORDER BY id',
};

/** Everything kept about the account, by table, as it stands now: what a person takes along. */
export async function accountExport(viewer: Viewer, at: Date): Promise<Record<string, unknown>> {
  const found: Record<string, unknown> = { madeAt: at.toISOString(), units: 'Lengths and diameters in the units their names say; money in cents of US dollars; times in UTC.' };
  for (const [name, sql] of Object.entries(parts)) found[name] = await rows(sql, [viewer.id]);
  return found;
}
