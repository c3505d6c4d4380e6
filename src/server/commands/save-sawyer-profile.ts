import { coarsePoint } from '~/domain/geo.ts';
import type { SawyerProfileForm } from '~/schemas/sawyer-profile-form.ts';
import { SawyerProfile } from '~/server/models/sawyer.ts';
import { authorize } from '../authorize.ts';
import { inTransaction } from '../db.ts';
import { invalid } from '../errors.ts';
import { placeOfZip } from '../services/places.ts';
import { timeZoneAt } from '../services/time-zones.ts';
import { record } from '../transition.ts';
import { baseRoles, type Viewer } from '../viewer.ts';

/**
 * Keeps what landowners read about a sawyer. The base is the ZIP code's centre moved to the coarse grid; nothing finer is stored.
 * @throws Refusal `invalid` when the ZIP code has no place.
 */
export async function saveSawyerProfile(by: Viewer, form: SawyerProfileForm, at: Date): Promise<void> {
  authorize(by, 'sawyer', 'keepProfile', baseRoles(by));
  const place = placeOfZip(form.zip);
  if (place === null) throw invalid([{ path: 'zip', message: 'No place is known for this ZIP code. Try the one of the nearest town.' }]);
  const base = coarsePoint(place.point);
  await inTransaction(async () => {
    await SawyerProfile.upsert({ ...form, town: place.town, state: place.state, accountId: by.id, base: { type: 'Point', coordinates: [base.lng, base.lat] }, timeZone: timeZoneAt(base), updatedAt: at });
    await record(by, 'saveProfile', 'account', by.id, at);
  });
}
