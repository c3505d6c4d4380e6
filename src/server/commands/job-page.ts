import type { JobPageForm } from '~/schemas/after-forms.ts';
import { authorize, rolesOnBooking } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { conflict, invalid } from '../errors.ts';
import { photosToPick, shownName } from '../job-photos.ts';
import { lockBooking } from '../locks.ts';
import { JobPage } from '../models/index.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';

/**
 * The landowner picks the photographs and words of the job's page. What was agreed to has changed, so both are asked again.
 * @throws Refusal `invalid` for a photograph that is not of this job
 */
export async function keepJobPage(by: Viewer, number: number, form: JobPageForm, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(number);
    authorize(by, 'booking', 'keepJobPage', rolesOnBooking(by, booking), booking.status);
    const known = new Set((await photosToPick(booking)).map(({ id }) => id));
    if (form.photos.some((id) => !known.has(id))) throw invalid([{ path: 'photos', message: 'One of these photographs is not there any more. Choose again.' }]);
    await JobPage.upsert({ bookingId: booking.id, photoIds: [...new Set(form.photos)], words: form.words, landownerAgreedAt: null, sawyerAgreedAt: null, updatedAt: at });
    await record(by, 'keepJobPage', 'booking', booking.id, at);
  });
}

/** One side's word: everyone may read the job's page, which showed this (`shownName`), or it is private again. */
export type JobPageWord = { readonly agrees: true; readonly shows: string } | { readonly agrees: false };

/**
 * One side agrees that everyone may read the job's page as they read it, or keeps it private again, at any time.
 * @throws Refusal `conflict` when it shows something else by now
 */
export async function agreeToJobPage(by: Viewer, number: number, word: JobPageWord, at: Date): Promise<void> {
  await inTransaction(async () => {
    const booking = await lockBooking(number);
    authorize(by, 'booking', 'agreeToJobPage', rolesOnBooking(by, booking), booking.status);
    const agreedAt = word.agrees ? at : null;
    if (word.agrees && shownName(await JobPage.findByPk(booking.id)) !== word.shows) throw conflict('The page was changed since it was shown to you. Look at it as it is now, then say whether you agree.');
    await JobPage.findOrCreate({ where: { bookingId: booking.id }, defaults: { bookingId: booking.id, updatedAt: at } });
    await JobPage.update(by.id === booking.landownerId ? { landownerAgreedAt: agreedAt } : { sawyerAgreedAt: agreedAt }, { where: { bookingId: booking.id } });
    await record(by, word.agrees ? 'agreeToJobPage' : 'keepJobPrivate', 'booking', booking.id, at);
  });
}
