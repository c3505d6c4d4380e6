import { abilities, type Action } from '~/domain/permissions.ts';
import { gathered, type BoardLine } from '~/domain/timber/board-lines.ts';
import { countBoards, tallyRuleOf } from '~/domain/trade/tally-count.ts';
import { speciesOf } from '~/domain/timber/species.ts';
import type { Day } from '~/domain/time.ts';
import { rolesOnBooking } from '../authorize.ts';
import { conflict, notFound } from '../errors.ts';
import { bookedDaysOf } from '../invitations.ts';
import { photosToPick, shownName, type JobPhoto } from '../job-photos.ts';
import { Account, Booking, JobPage as Kept, Listing } from '../models/index.ts';
import { partiesOf } from '../parties.ts';
import { tallyWork, type TallyWork } from '../tally-work.ts';
import type { Viewer } from '../viewer.ts';

/** A job as it is shown around: from tree to boards, no exact place, no money, nobody's name but the sawyer's, who works in public. */
export interface JobPage {
  readonly number: number;
  readonly listingNumber: number;
  readonly title: string;
  readonly near: string;
  readonly sawyer: { readonly id: string; readonly name: string };
  readonly days: readonly Day[];
  readonly speciesNames: readonly string[];
  readonly logCount: number;
  readonly scaleBf: number;
  readonly tallyBf: number;
  readonly boards: readonly BoardLine[];
  readonly words: string;
  readonly photos: readonly JobPhoto[];
  /** Both sides agree, so everyone may read it. */
  readonly isPublic: boolean;
}

const boardsOf = (work: TallyWork, fallback: string): BoardLine[] =>
  gathered(work.boards.filter(({ kind }) => kind === 'board').map(({ logId, thicknessIn, widthIn, lengthFt, count }) => ({ species: work.onTheDay.find(({ id }) => id === logId)?.species ?? fallback, thicknessIn, widthIn, lengthFt, count })));

async function jobOf(booking: Booking, kept: Kept | null): Promise<JobPage> {
  const listing = await Listing.findByPk(booking.listingId, { rejectOnEmpty: true });
  const work = await tallyWork(booking);
  if (!work) throw notFound('job');
  const { sawyer } = await partiesOf(booking);
  const picked = new Set(kept?.photoIds ?? []);
  return {
    number: booking.number, listingNumber: listing.number, title: listing.title ?? '', near: [listing.town, listing.state].filter(Boolean).join(', '),
    sawyer: { id: sawyer.id, name: sawyer.name }, days: await bookedDaysOf(booking.id),
    speciesNames: listing.species.map((code) => speciesOf(code).name), logCount: work.logs.length, scaleBf: listing.boardFeet,
    tallyBf: countBoards(tallyRuleOf(work.terms), work.boards), boards: boardsOf(work, listing.species[0] ?? 'white-oak'),
    words: kept?.words ?? '', photos: (await photosToPick(booking)).filter(({ id }) => picked.has(id)),
    isPublic: kept !== null && kept.landownerAgreedAt !== null && kept.sawyerAgreedAt !== null,
  };
}

/**
 * The page of a job: for everyone while both sides agree to it and neither account nor listing has been taken off show; before that for its
 * two sides and moderators.
 * @throws Refusal `notFound`
 */
export async function jobPage(viewer: Viewer | null, number: number): Promise<JobPage> {
  const booking = Number.isSafeInteger(number) ? await Booking.findOne({ where: { number, status: 'settled' } }) : null;
  if (!booking) throw notFound('job');
  const kept = await Kept.findByPk(booking.id);
  const page = await jobOf(booking, kept);
  const hidden = (await Listing.count({ where: { id: booking.listingId, hiddenAt: null } })) === 0 || (await Account.count({ where: { id: [booking.landownerId, booking.sawyerId], status: 'active' } })) < 2;
  const sees = abilities('booking', rolesOnBooking(viewer, booking), booking.status).see;
  if (!sees && (!page.isPublic || hidden)) throw notFound('job');
  return { ...page, isPublic: page.isPublic && !hidden };
}

/** Where the two sides settle what the job's page shows and whether everyone may read it. */
export interface JobPageSettings {
  readonly number: number;
  readonly title: string;
  readonly side: 'landowner' | 'sawyer' | 'moderator';
  readonly otherName: string;
  readonly words: string;
  readonly photos: readonly (JobPhoto & { readonly picked: boolean })[];
  readonly agreed: { readonly landowner: boolean; readonly sawyer: boolean };
  /** Names what the page shows; an agreement is to that. */
  readonly shows: string;
  readonly can: Record<Action<'booking'>, boolean>;
}

/** @throws Refusal `notFound` for others than the two sides and moderators, `conflict` before the job is settled */
export async function jobPageSettings(viewer: Viewer, number: number): Promise<JobPageSettings> {
  const booking = Number.isSafeInteger(number) ? await Booking.findOne({ where: { number } }) : null;
  const can = booking && abilities('booking', rolesOnBooking(viewer, booking), booking.status);
  if (!booking || !can?.see) throw notFound('booking');
  if (booking.status !== 'settled') throw conflict('A job can be shown around once it is settled.');
  const kept = await Kept.findByPk(booking.id);
  const { landowner, sawyer } = await partiesOf(booking);
  const listing = await Listing.findByPk(booking.listingId, { rejectOnEmpty: true });
  return {
    number, title: listing.title ?? '', side: viewer.id === landowner.id ? 'landowner' : viewer.id === sawyer.id ? 'sawyer' : 'moderator',
    otherName: viewer.id === landowner.id ? sawyer.name : landowner.name, words: kept?.words ?? '',
    photos: (await photosToPick(booking)).map((photo) => ({ ...photo, picked: kept?.photoIds.includes(photo.id) ?? false })),
    agreed: { landowner: Boolean(kept?.landownerAgreedAt), sawyer: Boolean(kept?.sawyerAgreedAt) }, shows: shownName(kept), can,
  };
}
