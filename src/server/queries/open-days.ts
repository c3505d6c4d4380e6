import { dayStates, earliestOpenDay } from '~/domain/trade/milling-days.ts';
import { dayAt, FURTHEST_DAYS, type Day } from '~/domain/time.ts';
import { rows } from '../db.ts';
import { SawyerProfile } from '../models/sawyer.ts';

/**
 * A sawyer's days from today to the furthest that may be booked, with what stands on each. Booked days say nothing of whose they are.
 * @param offered days offered on the bid at hand
 * @param ownBooking days of this booking do not count as taken
 */
export async function sawyerDays(sawyerId: string, zone: string, at: Date, offered: readonly Day[] = [], ownBooking: string | null = null): Promise<ReturnType<typeof dayStates>> {
  const today = dayAt(at, zone);
  const profile = await SawyerProfile.findByPk(sawyerId);
  const booked = await rows<{ day: string }>('SELECT day::text AS day FROM booked_day WHERE sawyer_id = $1 AND active AND day >= $2 AND ($3::uuid IS NULL OR booking_id <> $3)', [sawyerId, today, ownBooking]);
  const off = await rows<{ day: string }>('SELECT day::text AS day FROM sawyer_off WHERE sawyer_id = $1 AND day >= $2', [sawyerId, today]);
  return dayStates(today, FURTHEST_DAYS + 1, {
    workingDays: profile?.workingDays ?? [1, 2, 3, 4, 5, 6],
    notice: profile?.noticeDays ?? 1,
    booked: new Set(booked.map(({ day }) => day)),
    off: new Set(off.map(({ day }) => day)),
    offered: new Set(offered),
  });
}

/** The sawyer's earliest open day, or null when the next two months are full. */
export const earliestOpenDayOf = async (sawyerId: string, zone: string, at: Date): Promise<Day | null> => earliestOpenDay(await sawyerDays(sawyerId, zone, at));
