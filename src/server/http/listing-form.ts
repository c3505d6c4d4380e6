import { randomUUID } from 'node:crypto';
import { blankLog, blankPiece, emptyListing, listingFromFields, type ListingTyped } from '~/domain/listing/draft.ts';
import { formatFeet, formatFraction } from '~/domain/measure.ts';
import { numberIn, paths } from '~/domain/paths.ts';
import type { Problem } from '~/domain/result.ts';
import { addDays, dayAt } from '~/domain/time.ts';
import { eachLog, readLogs, writeDefect } from '~/domain/timber/logs-in-url.ts';
import { speciesOf } from '~/domain/timber/species.ts';
import type { FormNotice } from '~/schemas/listing-draft.ts';
import { listingTyped } from '~/schemas/listing-form.ts';
import { publishListing } from '../commands/publish-listing.ts';
import { reviseListing } from '../commands/revise-listing.ts';
import { SAVED_ELSEWHERE, saveDraft } from '../commands/save-draft.ts';
import { Refusal } from '../errors.ts';
import { listingToEdit, type ListingToEdit } from '../queries/listing-to-edit.ts';
import type { Viewer } from '../viewer.ts';
import { problemsOf } from './endpoint.ts';
import { statusOf } from './problem.ts';

/** Everything the page of the form shows. */
export interface ListingFormPage {
  readonly status: number;
  /** Null for one that was never saved. */
  readonly number: number | null;
  readonly isDraft: boolean;
  /** As it is kept; null for a visitor, also for one whose session has ended. */
  readonly listing: ListingToEdit | null;
  readonly typedVersion: number | null;
  readonly typed: ListingTyped;
  readonly problems: readonly Problem[];
  readonly notice: FormNotice | null;
  readonly sent: boolean;
  readonly logsGiven: boolean;
}

/** Where the form leads next: a page to show, or an address to go to. */
export type ListingFormAnswer = { readonly goTo: string } | ListingFormPage;

const WEEKS_OPEN = 2;

const withRoom = (typed: ListingTyped): ListingTyped => (typed.logs.length > 0 ? typed : { ...typed, logs: [blankLog(randomUUID())] });

/** The logs of the estimator's address as rows of the form; null when they cannot be read. */
function logsFrom(text: string): ListingTyped['logs'] | null {
  const read = readLogs(text);
  if (!read.ok) return null;
  return eachLog(read.value).map((log) => ({
    ...blankLog(randomUUID(), speciesOf(log.species).name),
    smallEnd: formatFraction(log.smallEndIn), largeEnd: log.largeEndIn === undefined ? '' : formatFraction(log.largeEndIn), length: formatFeet(log.lengthFt),
    defects: (log.defects ?? []).map(writeDefect).join(''),
  }));
}

/** The form as it is opened, empty or with a kept listing. */
export async function openListingForm(viewer: Viewer | null, number: number | null, query: URLSearchParams, at: Date): Promise<ListingFormAnswer> {
  const page = { status: 200, problems: [], sent: false, logsGiven: false };
  if (number !== null) {
    const listing = await listingToEdit(viewer, number);
    if (!listing.can.edit) return { goTo: paths.listing(number) };
    return { ...page, number, isDraft: listing.status === 'draft', listing, typedVersion: listing.typedVersion, typed: withRoom(listing.typed), notice: query.has('saved') ? 'saved' : null };
  }
  const closesOn = addDays(dayAt(at, 'America/Chicago'), 7 * WEEKS_OPEN);
  const before = numberIn(query.get('from') ?? undefined);
  if (before !== null) {
    // The same logs once more: ids are new, for the old ones keep their photographs and bids.
    const { typed } = await listingToEdit(viewer, before);
    const again = { ...typed, closesOn, ownerConfirmed: '', logs: typed.logs.map((log) => ({ ...log, id: randomUUID() })) };
    return { ...page, number: null, isDraft: true, listing: null, typedVersion: null, typed: withRoom(again), notice: null, sent: true };
  }
  const given = query.get('logs');
  const logs = given === null ? [] : logsFrom(given);
  const typed = { ...emptyListing(), closesOn, logs: logs ?? [] };
  return { ...page, number: null, isDraft: true, listing: null, typedVersion: null, typed: withRoom(typed), notice: logs === null ? 'logs-unreadable' : null, logsGiven: (logs?.length ?? 0) > 0 };
}

/** Adds or takes away a row for a page without script; undefined when that was not the deed. */
function withRows(typed: ListingTyped, deed: string): ListingTyped | undefined {
  if (deed === 'add-log') return { ...typed, logs: [...typed.logs, blankLog(randomUUID(), typed.logs.at(-1)?.species ?? '')] };
  if (deed === 'add-piece') return { ...typed, pieces: [...typed.pieces, blankPiece()] };
  const removed = /^remove-(log|piece):(\d+)$/.exec(deed);
  if (!removed) return undefined;
  const keep = (_: unknown, index: number): boolean => index !== Number(removed[2]);
  return removed[1] === 'log' ? { ...typed, logs: typed.logs.filter(keep) } : { ...typed, pieces: typed.pieces.filter(keep) };
}

interface Sent {
  readonly viewer: Viewer;
  readonly number: number | null;
  readonly typedVersion: number | null;
  readonly typed: ListingTyped;
  readonly deed: string;
  readonly at: Date;
}

/** Does what the pressed button says. A draft is saved before anything else is tried, so that a refusal loses nothing. */
async function act({ viewer, number, typedVersion, typed, deed, at }: Sent, saved: (number: number, version: number, typed: ListingTyped) => void): Promise<string> {
  if (deed === 'revise' && number !== null && typedVersion !== null) {
    await reviseListing(viewer, { number, typedVersion, typed }, at);
    return `${paths.listing(number)}?changed`;
  }
  const draft = await saveDraft(viewer, { number, typedVersion: deed === 'overwrite' ? null : typedVersion, typed }, at);
  saved(draft.number, draft.typedVersion, draft.typed);
  if (deed !== 'publish') return `${paths.editListing(draft.number)}?saved${deed === 'photographs' ? '#photographs' : ''}`;
  await publishListing(viewer, draft, at);
  return `${paths.listing(draft.number)}?published`;
}

/** The form as it was sent: saved, published or revised, or shown again with everything that was typed and what to put right. */
export async function answerListingForm(viewer: Viewer | null, number: number | null, data: FormData, at: Date): Promise<ListingFormAnswer> {
  const fields = [...data].flatMap(([name, value]) => (typeof value === 'string' ? [[name, value] as const] : []));
  const deed = String(data.get('deed') ?? 'save');
  const version = Number(data.get('typedVersion') || Number.NaN);
  let typed = listingFromFields(fields);
  let kept: { number: number | null; version: number | null } = { number, version: Number.isSafeInteger(version) ? version : null };
  const again = async (status: number, changes: Partial<ListingFormPage>): Promise<ListingFormPage> => {
    const listing = kept.number === null || !viewer ? null : await listingToEdit(viewer, kept.number);
    const isDraft = listing ? listing.status === 'draft' : deed !== 'revise';
    return { status, number: kept.number, isDraft, listing, typedVersion: kept.version, typed: withRoom(typed), problems: [], notice: null, sent: true, logsGiven: false, ...changes };
  };

  const rows = withRows(typed, deed);
  if (rows) {
    typed = rows;
    return again(200, {});
  }
  if (!viewer) return again(401, { notice: number === null ? 'account' : 'session' });
  const size = listingTyped.safeParse(typed);
  if (!size.success) return again(422, { problems: problemsOf(size.error) });
  try {
    const goTo = await act({ viewer, number, typedVersion: kept.version, typed, deed, at }, (savedNumber, savedVersion, savedTyped) => {
      kept = { number: savedNumber, version: savedVersion };
      typed = savedTyped;
    });
    return { goTo };
  } catch (error) {
    if (!(error instanceof Refusal) || error.kind === 'notFound') throw error;
    const notice = error.kind === 'invalid' ? null : error.message === SAVED_ELSEWHERE ? 'elsewhere' : { words: error.message };
    return again(statusOf(error), { problems: error.problems, notice });
  }
}
