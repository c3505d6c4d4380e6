import type { Day } from '~/domain/time.ts';
import { authorize } from '../authorize.ts';
import { changedDays, daysOffFrom, giveDaysBack, lockedBookedDays, takeDaysOff, todayOf, type DaysOffChanged } from '../days-off.ts';
import { inTransaction } from '../db.ts';
import { record } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

/**
 * Takes days off and gives days back. Days past are left alone; a booked day stays booked: it is moved with the landowner, not by this.
 * A day given back is open whoever took it, the sawyer or another calendar; one taken off is off whatever that calendar says later.
 */
export async function changeDaysOff(by: Viewer, change: { readonly add: readonly Day[]; readonly remove: readonly Day[] }, at: Date): Promise<DaysOffChanged> {
  authorize(by, 'sawyer', 'keepCalendar', baseRoles(by));
  return inTransaction(async () => {
    const booked = await lockedBookedDays(by.id);
    const from = await todayOf(by.id, at);
    const before = await daysOffFrom(by.id, from);
    const add = [...new Set(change.add)].filter((day) => day >= from);
    await takeDaysOff(by.id, add.filter((day) => !booked.has(day)));
    await giveDaysBack(by.id, change.remove.filter((day) => day >= from), at);
    const { added, removed } = changedDays(before, await daysOffFrom(by.id, from));
    if (added + removed > 0) await record(by, 'changeDaysOff', 'account', by.id, at, { data: { added, removed } });
    return { added, removed, booked: add.filter((day) => booked.has(day)).sort() };
  });
}
