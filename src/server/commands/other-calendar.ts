import { addHours } from '~/domain/time.ts';
import { authorize } from '../authorize.ts';
import type { DaysOffChanged } from '../days-off.ts';
import { inTransaction, lockFor, rows } from '../db.ts';
import { Refusal } from '../errors.ts';
import { OtherCalendar } from '../models/sawyer.ts';
import { seal, unseal } from '../sealing.ts';
import { outsideText, outsideUrl } from '../services/outside-text.ts';
import { record } from '../transition.ts';
import { baseRoles, system, type Viewer } from '../viewer.ts';
import { readBusyDays, takeBusyDays } from './busy-days.ts';

const PURPOSE = 'other-calendar';
/** Read again after so many hours; after a failure sooner, then more and more seldom. */
const READ_EVERY_H = 6;
const SELDOM_H = 48;
/** So many are read in one sweep. */
const AT_ONCE = 20;

/** A calendar that reads badly is wrong at its address, wherever the fault was found. */
const atAddress = (error: unknown): unknown => (error instanceof Refusal && error.kind === 'invalid' ? new Refusal('invalid', error.message, { problems: error.problems.map(({ message }) => ({ path: 'address', message })) }) : error);

/**
 * Keeps the address of another calendar and takes its busy days as days off; it is read again by itself from then on.
 * @param leastHours how many hours of entries make a day busy; whole-day entries always do
 * @throws Refusal `invalid` at `address` when nothing can be read there or it is no calendar
 */
export async function keepOtherCalendar(by: Viewer, calendar: { readonly address: string; readonly leastHours: number }, at: Date): Promise<DaysOffChanged> {
  authorize(by, 'sawyer', 'keepCalendar', baseRoles(by));
  const { href, host } = outsideUrl(calendar.address);
  const text = await outsideText(href);
  try {
    const days = await readBusyDays(by.id, { text, leastHours: calendar.leastHours }, at);
    return await inTransaction(async () => {
      const changed = await takeBusyDays(by.id, { days, by: 'address', name: host }, at);
      await OtherCalendar.upsert({ sawyerId: by.id, addressSealed: seal(PURPOSE, by.id, href), host, leastHours: calendar.leastHours, madeAt: at, readAt: at, readNext: addHours(at, READ_EVERY_H), failures: 0, failedBecause: null });
      await record(by, 'keepOtherCalendar', 'account', by.id, at, { data: { host, added: changed.added, removed: changed.removed } });
      return changed;
    });
  } catch (error) {
    throw atAddress(error);
  }
}

/** The other calendar is not read again. The days taken from it stay until they are given back. */
export async function stopOtherCalendar(by: Viewer, at: Date): Promise<void> {
  authorize(by, 'sawyer', 'keepCalendar', baseRoles(by));
  await inTransaction(async () => {
    await lockFor('calendar', by.id);
    if ((await OtherCalendar.destroy({ where: { sawyerId: by.id } })) > 0) await record(by, 'stopOtherCalendar', 'account', by.id, at);
  });
}

/** Reads again every other calendar whose time has come. One that cannot be read keeps the days it gave, and is tried more and more seldom. */
export async function readOtherCalendars(at: Date): Promise<void> {
  const due = await rows<{ id: string }>(
    `SELECT sawyer_id AS id FROM other_calendar JOIN account ON account.id = sawyer_id WHERE read_next <= $1 AND account.status = 'active' ORDER BY read_next LIMIT ${AT_ONCE}`,
    [at],
  );
  // All at once: a host that hangs costs the sweep ten seconds, not ten for each.
  const read = await Promise.allSettled(due.map(({ id }) => readAgain(id, at)));
  const failed = read.find((one) => one.status === 'rejected');
  if (failed) throw failed.reason;
}

async function readAgain(sawyerId: string, at: Date): Promise<void> {
  const kept = await OtherCalendar.findByPk(sawyerId);
  if (!kept) return;
  const address = unseal(PURPOSE, sawyerId, kept.addressSealed);
  try {
    if (address === null) throw new Refusal('invalid', 'The address can no longer be opened. Give it again.');
    const days = await readBusyDays(sawyerId, { text: await outsideText(address), leastHours: kept.leastHours }, at);
    await inTransaction(async () => {
      // The calendar first, its address second, as whoever stops or changes it does.
      await lockFor('calendar', sawyerId);
      // Stopped or changed meanwhile: then what was read is no longer wanted.
      const current = await OtherCalendar.findByPk(sawyerId, { lock: true });
      if (current?.addressSealed !== kept.addressSealed || current.leastHours !== kept.leastHours) return;
      const { added, removed } = await takeBusyDays(sawyerId, { days, by: 'address', name: current.host }, at);
      await current.update({ readAt: at, readNext: addHours(at, READ_EVERY_H), failures: 0, failedBecause: null });
      if (added + removed > 0) await record(system('other calendar'), 'readOtherCalendar', 'account', sawyerId, at, { data: { added, removed } });
    });
  } catch (error) {
    if (!(error instanceof Refusal)) throw error;
    const failures = kept.failures + 1;
    await OtherCalendar.update(
      { failures, failedBecause: error.problems[0]?.message ?? error.message, readNext: addHours(at, Math.min(SELDOM_H, 2 ** failures)) },
      { where: { sawyerId, addressSealed: kept.addressSealed } },
    );
  }
}
