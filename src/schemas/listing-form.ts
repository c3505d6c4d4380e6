import { z } from 'zod';
import { checkPoint, type Point } from '~/domain/geo.ts';
import {
  barkChoices, machines, metalRisks, overheadLines, reDeckers, sawdustEnds, slabEnds, slopes, treeOwners, trucks, water, waysDown,
  type Access, type Landing, type Option, type Waste,
} from '~/domain/listing/answers.ts';
import { answerNames, isBlankLog, isBlankPiece, MOST_LOGS, MOST_PIECES, type ListingTyped, type LogTyped, type PieceTyped } from '~/domain/listing/draft.ts';
import { readLogRow, readPieceRow, type LogRead, type PieceRead } from '~/domain/listing/rows.ts';
import { parseNumber } from '~/domain/measure.ts';
import { good, refused, type Problem, type Result } from '~/domain/result.ts';
import { addDays, formatDayWithYear, type Day } from '~/domain/time.ts';
import { choice, day, inches, optional, text, whole } from './fields.ts';

/** How long a listing may stay open to bids. */
export const LONGEST_OPEN_DAYS = 120;
/** A stem that lay longer is worth a question first. */
const OLDEST_YEARS = 10;

const cell = z.string().max(4_000, { error: 'This is longer than we keep: at most 4,000 characters.' }).default('');
const row = <const F extends string>(...fields: readonly F[]) => z.object(Object.fromEntries(fields.map((field) => [field, cell])) as Record<F, typeof cell>);

/** A form as typed, on its way to being kept. Checks size only: a draft may hold anything. */
export const listingTyped: z.ZodType<ListingTyped> = row(
  'treeOwner', 'ownerConfirmed', 'howDown', 'cameDownOn', 'sealed', 'measured', 'zip', 'lat', 'lng', 'directions', 'truck', 'gateWidth', 'slope', 'lines', 'machine', 'machineNote',
  'water', 'helpers', 'pad', 'offDirt', 'parallel', 'rolling', 'reDecks', 'landingNote', 'slabs', 'sawdust', 'metal', 'metalNote', 'note', 'closesOn',
).extend({
  logs: z.array(row('id', 'species', 'smallEnd', 'largeEnd', 'length', 'heart', 'defects', 'note')).max(MOST_LOGS, { error: `At most ${MOST_LOGS} logs in one listing.` }).default([]),
  pieces: z.array(row('label', 'thickness', 'width', 'length', 'count', 'sizing', 'kind', 'dwelling')).max(MOST_PIECES, { error: `At most ${MOST_PIECES} sizes in one cut list.` }).default([]),
});

/** A listing as it was understood. */
export interface ListingForm {
  readonly treeOwner: 'mine' | 'permission';
  readonly howDown: 'snapped' | 'uprooted' | 'felled' | 'cleared';
  readonly cameDownOn: Day;
  readonly endsSealed: boolean;
  readonly zip: string;
  /** The pin; null leaves the middle of the ZIP area. */
  readonly pin: Point | null;
  readonly logs: readonly LogRead[];
  readonly pieces: readonly PieceRead[];
  readonly access: Access;
  readonly landing: Landing;
  readonly waste: Waste;
  readonly metalRisk: 'none-known' | 'lawn-tree' | 'fence-line' | 'known-metal' | 'unknown';
  readonly metalNote: string;
  readonly note: string;
  readonly closesOn: Day;
}

const oneOf = <V extends string>(options: readonly Option<V>[], missing: string): ((typed: string) => Result<V>) => choice(options.map(({ value }) => value), missing);

const readZip = (typed: string): Result<string> => {
  const found = /^(\d{5})(?:-\d{4})?$/.exec(typed)?.[1];
  return found ? good(found) : refused('', typed === '' ? 'Write the five digits of the ZIP code where the logs lie.' : 'A ZIP code has five digits, like 54665.');
};

const readCameDown = (today: Day) => (typed: string): Result<Day> => {
  if (typed === '') return refused('', 'Write the day the tree came down, like 2026-07-14. A guess is better than nothing.');
  const read = day(typed);
  if (!read.ok) return read;
  if (read.value > today) return refused('', 'That day has not come yet. List the tree once it is down.');
  return read.value < addDays(today, -366 * OLDEST_YEARS) ? refused('', `That is over ${OLDEST_YEARS} years ago. Check the year.`) : read;
};

const readCloses = (today: Day) => (typed: string): Result<Day> => {
  if (typed === '') return refused('', 'Choose the last day for bids.');
  const read = day(typed);
  if (!read.ok) return read;
  if (read.value <= today) return refused('', 'Choose a day after today, so that sawyers have time to bid.');
  const last = addDays(today, LONGEST_OPEN_DAYS);
  return read.value > last ? refused('', `At most ${LONGEST_OPEN_DAYS} days ahead: ${formatDayWithYear(last)} is the last.`) : read;
};

/** A coordinate as people copy it: `43.5561`, `-90.8884`, `90.8884 W`, with a degree sign. */
const readDegrees = (typed: string): number => {
  const match = /^([-−–+]?)\s*([\d.,]+)\s*°?\s*([NSEW]?)$/i.exec(typed);
  const value = match ? parseNumber(match[2] ?? '') : null;
  if (!match || value === null) return Number.NaN;
  return /[-−–]/.test(match[1] ?? '') || /[SW]/i.test(match[3] ?? '') ? -value : value;
};

/** Reads every answer and collects every problem, each at its field. */
class Answers {
  readonly problems: Problem[] = [];
  constructor(private readonly typed: ListingTyped) {}

  take<T>(field: Exclude<keyof ListingTyped, 'logs' | 'pieces'>, read: (text: string) => Result<T>): T {
    const result = read(this.typed[field].trim());
    if (result.ok) return result.value;
    for (const { message } of result.problems) this.problems.push({ path: field, message });
    // Never used: a form with problems gives no value.
    return undefined as T;
  }

  rows<Typed, Read>(name: 'logs' | 'pieces', rows: readonly Typed[], isBlank: (row: Typed) => boolean, read: (row: Typed) => Result<Read>): readonly Read[] {
    return rows.flatMap((typed, index) => {
      if (isBlank(typed)) return [];
      const result = read(typed);
      if (result.ok) return [result.value];
      this.problems.push(...result.problems.map(({ path, message }) => ({ path: `${name}.${index}.${path}`, message })));
      return [];
    });
  }

  pin(): Point | null {
    const [lat, lng] = [this.typed.lat.trim(), this.typed.lng.trim()];
    if (lat === '' && lng === '') return null;
    if (lat === '' || lng === '') {
      this.problems.push({ path: lat === '' ? 'lat' : 'lng', message: 'A pin needs both numbers, latitude and longitude.' });
      return null;
    }
    const point = checkPoint(readDegrees(lat), readDegrees(lng));
    if (point.ok) return point.value;
    this.problems.push(...point.problems.map(({ path, message }) => ({ path, message: `${message} Like 43.5561 and -90.8884.` })));
    return null;
  }
}

/** Reads a typed listing on the site's own day; every problem at once, at its own field (`logs.2.smallEnd`). */
export function readListing(typed: ListingTyped, today: Day): Result<ListingForm> {
  const answers = new Answers(typed);
  if (typed.ownerConfirmed === '') answers.problems.push({ path: 'ownerConfirmed', message: 'Confirm that you may have this tree sawn.' });
  const measured = answers.take('measured', oneOf(barkChoices, 'Say whether you measured inside or over the bark.'));
  const logs = answers.rows<LogTyped, LogRead>('logs', typed.logs, isBlankLog, (log) => readLogRow(log, measured ?? 'inside'));
  if (typed.logs.every(isBlankLog)) answers.problems.push({ path: 'logs.0.smallEnd', message: 'Measure at least one log: its small end and its length.' });
  const lines = answers.take('lines', oneOf(overheadLines, 'Look up: say whether there are overhead lines.'));
  const form: ListingForm = {
    treeOwner: answers.take('treeOwner', oneOf(treeOwners, 'Say whose tree it is.')),
    howDown: answers.take('howDown', oneOf(waysDown, 'Say how it came down.')),
    cameDownOn: answers.take('cameDownOn', readCameDown(today)),
    endsSealed: answers.take('sealed', choice(['yes', 'no'], 'Say whether the ends are sealed.')) === 'yes',
    zip: answers.take('zip', readZip),
    pin: answers.pin(),
    logs,
    pieces: answers.rows<PieceTyped, PieceRead>('pieces', typed.pieces, isBlankPiece, readPieceRow),
    access: {
      truck: answers.take('truck', oneOf(trucks, 'Say how close a truck can come.')),
      gateWidthIn: answers.take('gateWidth', optional(readGate)),
      slope: answers.take('slope', oneOf(slopes, 'Say how the ground lies.')),
      lines,
      machine: answers.take('machine', oneOf(machines, 'Say whether there is a machine on site.')),
      machineNote: answers.take('machineNote', text(200)),
      water: answers.take('water', oneOf(water, 'Say whether there is water at the landing.')),
      helpers: answers.take('helpers', (typed_) => (typed_ === '' ? good(0) : whole(0, 20, 'helpers')(typed_))),
    },
    landing: {
      pad: typed.pad !== '', offDirt: typed.offDirt !== '', parallel: typed.parallel !== '', rolling: typed.rolling !== '',
      reDecks: answers.take('reDecks', oneOf(reDeckers, 'Say who moves the logs to the mill.')),
      note: answers.take('landingNote', text(1_000)),
    },
    waste: {
      slabs: answers.take('slabs', oneOf(slabEnds, 'Say what becomes of the slabs.')),
      sawdust: answers.take('sawdust', oneOf(sawdustEnds, 'Say what becomes of the sawdust.')),
    },
    metalRisk: answers.take('metal', oneOf(metalRisks, 'Say what you know about metal in the tree.')),
    metalNote: answers.take('metalNote', text(500)),
    note: answers.take('note', text(4_000)),
    closesOn: answers.take('closesOn', readCloses(today)),
  };
  answers.take('directions', text(1_000));
  return answers.problems.length === 0 ? good(form) : { ok: false, problems: inFormOrder(answers.problems) };
}

const order: readonly string[] = answerNames.flatMap((name) => (name === 'measured' ? [name, 'logs'] : name === 'metalNote' ? [name, 'pieces'] : [name]));

/** As the fields stand on the page, so that a list of problems is worked down without jumping. */
const inFormOrder = (problems: readonly Problem[]): readonly Problem[] => {
  const place = ({ path }: Problem): number => order.indexOf(path.split('.', 1)[0] ?? '');
  return [...problems].sort((a, b) => place(a) - place(b));
};

/** A gate: a bare number is feet when it cannot be inches. */
function readGate(typed: string): Result<number> {
  const bare = /^[\d.]+$/.test(typed) && Number(typed) < 24;
  return inches(24, 1_200)(bare ? `${typed} ft` : typed);
}

/** The listing's form as a schema: what people type in, what we understand out. `today` is the site's own day. */
export const listingFormOn = (today: Day): z.ZodType<ListingForm, ListingTyped> =>
  listingTyped.transform((typed, context): ListingForm => {
    const read = readListing(typed, today);
    if (read.ok) return read.value;
    for (const { path, message } of read.problems) context.addIssue({ code: 'custom', path: path.split('.').map((part) => (/^\d+$/.test(part) ? Number(part) : part)), message });
    return z.NEVER;
  }) as z.ZodType<ListingForm, ListingTyped>;
