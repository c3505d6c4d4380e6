import { dayAt, type Day } from '~/domain/time.ts';
import { execute, lockFor, rows } from './db.ts';
import { SawyerProfile } from './models/sawyer.ts';

/** What a change of a sawyer's calendar came to, in days. */
export interface DaysOffChanged {
  readonly added: number;
  readonly removed: number;
  /** Days that were asked for and stay working days, because a booking stands on them. */
  readonly booked: readonly Day[];
}

/** The sawyer's own today. */
export const todayOf = async (sawyerId: string, at: Date): Promise<Day> => dayAt(at, (await SawyerProfile.findByPk(sawyerId))?.timeZone ?? 'UTC');

/** The days on which a booking stands. The sawyer's calendar is locked, so nobody books one meanwhile. */
export async function lockedBookedDays(sawyerId: string): Promise<ReadonlySet<Day>> {
  await lockFor('calendar', sawyerId);
  return new Set((await rows<{ day: Day }>('SELECT day::text AS day FROM booked_day WHERE sawyer_id = $1 AND active', [sawyerId])).map(({ day }) => day));
}

/** The days from `first` on that the sawyer does not saw on, whoever said so. */
export const daysOffFrom = async (sawyerId: string, first: Day): Promise<ReadonlySet<Day>> =>
  new Set((await rows<{ day: Day }>('SELECT day::text AS day FROM sawyer_off WHERE sawyer_id = $1 AND day >= $2', [sawyerId, first])).map(({ day }) => day));

// The writers below are for a transaction that has locked the sawyer's calendar.

/** Puts own days off. */
export const takeDaysOff = async (sawyerId: string, days: readonly Day[]): Promise<void> =>
  void (await execute('INSERT INTO day_off (sawyer_id, day) SELECT $1, unnest($2::date[]) ON CONFLICT DO NOTHING', [sawyerId, days]));

/** Opens days, whoever took them off: the sawyer, or another calendar that names them still. */
export async function giveDaysBack(sawyerId: string, days: readonly Day[], at: Date): Promise<void> {
  await execute('DELETE FROM day_off WHERE sawyer_id = $1 AND day = ANY ($2::date[])', [sawyerId, days]);
  await execute('UPDATE busy_day SET given_back_at = $3 WHERE sawyer_id = $1 AND day = ANY ($2::date[]) AND given_back_at IS NULL', [sawyerId, days, at]);
}

/** How two sets of days off differ. */
export const changedDays = (before: ReadonlySet<Day>, after: ReadonlySet<Day>): { readonly added: number; readonly removed: number } => ({
  added: [...after].filter((day) => !before.has(day)).length,
  removed: [...before].filter((day) => !after.has(day)).length,
});
