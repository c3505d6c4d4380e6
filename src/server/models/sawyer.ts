import type { CertificateKind } from '~/domain/certificate.ts';
import type { BidState } from '~/domain/states/bid.ts';
import type { ListCover } from '~/domain/trade/list-cover.ts';
import { day, days, filled, givenId, id, instant, json, keyRef, keyWhole, nullable, point, real, ref, table, text, texts, whole, wholes, yes, type Row } from './table.ts';

/** `base` is snapped to the coarse grid before it is stored. */
export const SawyerProfile = table('sawyer_profile', {
  accountId: keyRef(),
  businessName: filled(text()),
  about: filled(text()),
  zip: nullable(text()),
  town: nullable(text()),
  state: nullable(text()),
  timeZone: nullable(text()),
  base: nullable(point()),
  travelMiles: filled(whole()),
  services: filled(texts()),
  languages: filled(texts()),
  lumberCredential: filled(text()),
  workingDays: filled(wholes()),
  noticeDays: filled(whole()),
  payoutAccount: nullable(text()),
  payoutsReady: filled(yes()),
  updatedAt: instant(),
});
export type SawyerProfile = Row<typeof SawyerProfile>;

const keyKind = { options: { ...text<CertificateKind>().options, primaryKey: true } } as ReturnType<typeof text<CertificateKind>>;
/** A sawyer's certificate of a kind: the one that waits for a moderator, with the last day that the sawyer read from it, and the one that was seen. */
export const Certificate = table('certificate', {
  sawyerId: keyRef(),
  kind: keyKind,
  waitingFile: nullable(ref()),
  sentAt: nullable(instant()),
  saysUntil: nullable(day()),
  seenFile: nullable(ref()),
  seenAt: nullable(instant()),
  expiresOn: nullable(day()),
  reminders: filled(whole()),
});
export type Certificate = Row<typeof Certificate>;

/** A file of a certificate, from the form that lets it be sent to its removal from storage. */
export const CertificateFile = table('certificate_file', { id: givenId(), sawyerId: ref(), kind: text<CertificateKind>(), formMadeAt: instant(), handedInAt: nullable(instant()), removeAfter: nullable(instant()), removedAt: nullable(instant()) });

const keyDay = { options: { ...day().options, primaryKey: true } } as ReturnType<typeof day>;
/** A day off that the sawyer took. */
export const DayOff = table('day_off', { sawyerId: keyRef(), day: keyDay });

/** How another calendar is brought: by its address, read again by itself, or once as a file. */
export type BroughtBy = 'address' | 'file';

/** Messages that a sawyer keeps ready for bids. */
export const ReadyMessage = table('ready_message', { id: id(), sawyerId: ref(), name: text(), body: text(), createdAt: instant(), updatedAt: instant() });
export type ReadyMessage = Row<typeof ReadyMessage>;

/** Another calendar of the sawyer's, read again by itself. */
export const OtherCalendar = table('other_calendar', { sawyerId: keyRef(), addressSealed: text(), host: text(), leastHours: whole(), madeAt: instant(), readAt: instant(), readNext: instant(), failures: filled(whole()), failedBecause: nullable(text()) });
export type OtherCalendar = Row<typeof OtherCalendar>;

/** The private address of a sawyer's calendar: the secret's hash, and the secret sealed for its owner. */
export const CalendarFeed = table('calendar_feed', { sawyerId: keyRef(), secretHash: text(), secretSealed: text(), madeAt: instant() });

export type MillKind = 'band' | 'swing-blade' | 'chainsaw' | 'circular';

export const Mill = table('mill', {
  id: id(),
  sawyerId: ref(),
  name: text(),
  kind: text<MillKind>(),
  kerfIn: real(),
  largestLogIn: real(),
  widestCutIn: real(),
  widestBoardIn: real(),
  longestFt: real(),
  shortestFt: real(),
  paceBfPerHour: whole(),
  turnsLogsBy: text<'machine' | 'hand'>(),
  realisedYield: filled(real()),
  yieldJobs: filled(whole()),
  /** Whether estimates go by what the mill's own jobs have shown. */
  learns: filled(yes()),
  learnedPace: nullable(whole()),
  paceJobs: filled(whole()),
  createdAt: instant(),
  retiredAt: nullable(instant()),
});
export type Mill = Row<typeof Mill>;

/** A new revision for each change; the highest is the current one. The card's shape is `domain/trade/rate-card.ts`. */
export const RateCard = table('rate_card', { sawyerId: keyRef(), revision: keyWhole(), card: json<unknown>(), createdAt: instant() });
export type RateCard = Row<typeof RateCard>;

/** `mill`, `card` and `estimate` are frozen copies. */
export const Bid = table('bid', {
  id: id(),
  listingId: ref(),
  listingRevision: whole(),
  sawyerId: ref(),
  millId: ref(),
  status: filled(text<BidState>()),
  mill: json<unknown>(),
  card: json<unknown>(),
  estimate: json<unknown>(),
  /** What the mill makes of the cut list: null until the job has planned it. */
  cutList: nullable(json<ListCover>()),
  roadMiles: real(),
  expectedBfHundredths: whole(),
  expectedBy: text(),
  overrideReason: nullable(text()),
  expectedCents: whole(),
  lowCents: whole(),
  highCents: whole(),
  holdCents: whole(),
  metalCapCents: filled(whole()),
  offBearer: text<'sawyer-brings' | 'landowner-provides'>(),
  daysOffered: filled(days()),
  message: filled(text()),
  createdAt: instant(),
  updatedAt: instant(),
  decidedAt: nullable(instant()),
});
export type Bid = Row<typeof Bid>;
