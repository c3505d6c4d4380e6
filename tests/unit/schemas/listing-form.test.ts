import { describe, expect, it } from 'vitest';
import { asListingTyped, isUntouched, emptyListing, listingFromFields } from '~/domain/listing/draft.ts';
import { readDiameterIn, readLogRow, readPieceRow } from '~/domain/listing/rows.ts';
import { listingTitle } from '~/domain/listing/summary.ts';
import { changedParts } from '~/domain/listing/changes.ts';
import { listingFormOn } from '~/schemas/listing-form.ts';
import { typedListing, typedLog, typedPiece } from '../../support/listing-forms.ts';

const form = listingFormOn('2026-07-20');
const problems = (typed: unknown): Record<string, string> => {
  const read = form.safeParse(typed);
  return Object.fromEntries((read.error?.issues ?? []).map(({ path, message }) => [path.join('.'), message]));
};
const value = <T>(read: { ok: true; value: T } | { ok: false; problems: readonly { message: string }[] }): T => {
  if (!read.ok) throw new Error(read.problems.map(({ message }) => message).join(' '));
  return read.value;
};
const said = (read: ReturnType<typeof readLogRow> | ReturnType<typeof readPieceRow>) => (read.ok ? {} : Object.fromEntries(read.problems.map(({ path, message }) => [path, message])));

describe('a diameter as people write it', () => {
  it.each([
    ['14', 14], ['14 1/2', 14.5], ['14-1/2"', 14.5], ['14½ in', 14.5], ['1\' 2"', 14], ['14,5', 14.5], ['36.83 cm', 14.5], ['14 x 15', 14.5], ['14 × 15', 14.5], ['14x15', 14.5],
    ['14" by 15"', 14.5], ['14 1/2 and 15 1/2 in', 15],
  ])('%s', (text, inches) => {
    expect(value(readDiameterIn(text))).toBeCloseTo(inches, 10);
  });
  it.each(['about a foot', '14 x', 'x 15', '13 x 14 x 15', '-14', ''])('refuses "%s"', (text) => {
    expect(readDiameterIn(text).ok).toBe(false);
  });
});

describe('a log', () => {
  it('reads feet and inches, a species by any of its names, rot and a note', () => {
    const log = value(readLogRow(typedLog({ species: 'northern white cedar', length: '8 ft 6 in', heart: '3', note: ' fork at the top ' }), 'inside'));
    expect(log).toMatchObject({ species: 'northern-white-cedar', lengthFt: 8.5, heartDefectIn: 3, note: 'fork at the top' });
  });
  it('explains what cannot be, at its field', () => {
    expect(said(readLogRow(typedLog({ smallEnd: '0' }), 'inside'))).toEqual({ smallEnd: expect.stringContaining('has a diameter') });
    expect(said(readLogRow(typedLog({ smallEnd: '2', largeEnd: '' }), 'inside'))).toEqual({ smallEnd: expect.stringContaining('under 4 in') });
    expect(said(readLogRow(typedLog({ smallEnd: '180', largeEnd: '' }), 'inside'))).toEqual({ smallEnd: expect.stringContaining('Check the unit') });
    expect(said(readLogRow(typedLog({ smallEnd: '22' }), 'inside'))).toEqual({ largeEnd: 'The large end (20 1/2 in) is smaller than the small end (22 in). Swap them, or measure again.' });
    expect(said(readLogRow(typedLog({ length: '90 ft' }), 'inside'))).toEqual({ length: expect.stringContaining('List each log') });
    expect(said(readLogRow(typedLog({ length: '150' }), 'inside'))).toEqual({ length: expect.stringContaining('If you meant inches, write 150 in.') });
    expect(said(readLogRow(typedLog({ length: '18 in' }), 'inside'))).toEqual({ length: expect.stringContaining('too short') });
    expect(said(readLogRow(typedLog({ heart: '18' }), 'inside'))).toEqual({ heart: expect.stringContaining('as wide as the log') });
    expect(said(readLogRow(typedLog({ species: 'oak' }), 'inside'))).toEqual({ species: expect.stringMatching(/^Which one: .*oak/) });
    expect(said(readLogRow(typedLog({ species: 'Sequoia of the moon' }), 'inside'))).toEqual({ species: expect.stringContaining('no species called') });
  });
  it('takes the bark off a reading over it, before the ends are compared and bounded', () => {
    const over = value(readLogRow(typedLog({ smallEnd: '20', largeEnd: '22' }), 'over'));
    const inside = value(readLogRow(typedLog({ smallEnd: '20', largeEnd: '22' }), 'inside'));
    expect(over.smallEndIn / inside.smallEndIn).toBeCloseTo((over.largeEndIn ?? 0) / (inside.largeEndIn ?? 1), 12);
    expect(over.smallEndIn).toBeLessThan(20);
    expect(said(readLogRow(typedLog({ smallEnd: '4', largeEnd: '' }), 'over'))).toHaveProperty('smallEnd');
  });
  it('keeps the defects that came from the estimator', () => {
    expect(value(readLogRow(typedLog({ defects: '!sweep-3!section-4' }), 'inside')).defects).toEqual([{ kind: 'sweep', departureIn: 3 }, { kind: 'section', lengthFt: 4 }]);
  });
});

describe('a piece', () => {
  it('reads quarters as inches and counts one when no count is given', () => {
    expect(value(readPieceRow(typedPiece({ thickness: '5/4', count: '', dwelling: 'on', sizing: 'store-size' })))).toEqual({ label: 'Table top', thicknessIn: 1.25, widthIn: 8, lengthFt: 8, count: 1, sizing: 'store-size', forDwelling: true, kind: 'board' });
  });
  it('explains what is missing or odd', () => {
    expect(Object.keys(said(readPieceRow(typedPiece({ thickness: '', width: '6 ft 1', length: '41', count: '1.5' })))).sort()).toEqual(['count', 'length', 'thickness', 'width']);
  });
});

describe('the whole form', () => {
  it('understands what a landowner types', () => {
    const read = form.parse(typedListing({ lat: '43.5561° N', lng: '90.8884 W', gateWidth: '12', helpers: '', zip: '54665-0012' }));
    expect(read).toMatchObject({ zip: '54665', pin: { lat: 43.5561, lng: -90.8884 }, endsSealed: true, closesOn: '2026-08-10', access: { gateWidthIn: 144, helpers: 0 }, landing: { pad: true, reDecks: 'owner' } });
    expect(read.logs).toHaveLength(3);
  });
  it('leaves out blank rows but counts problems by the row as it stands on the page', () => {
    const blank = typedLog({ smallEnd: '', largeEnd: '', length: '' });
    expect(form.parse(typedListing({ logs: [blank, typedLog(), blank] })).logs).toHaveLength(1);
    expect(problems(typedListing({ logs: [blank, typedLog(), typedLog({ length: '' })] }))).toEqual({ 'logs.2.length': 'Write the length, for instance 8 ft 6 in. A bare number is feet.' });
  });
  it('asks for everything that is missing at once', () => {
    const missing = problems({ ...emptyListing() });
    expect(Object.keys(missing).sort()).toEqual([
      'cameDownOn', 'closesOn', 'howDown', 'lines', 'logs.0.smallEnd', 'machine', 'metal', 'ownerConfirmed', 'reDecks', 'sawdust', 'sealed', 'slabs', 'slope', 'treeOwner', 'truck', 'water', 'zip',
    ]);
    for (const message of Object.values(missing)) expect(message).toMatch(/\.$/);
  });
  it('says what is wrong with a date, a pin, a gate', () => {
    expect(problems(typedListing({ cameDownOn: '2026-07-21' }))).toEqual({ cameDownOn: 'That day has not come yet. List the tree once it is down.' });
    expect(problems(typedListing({ cameDownOn: '2026-02-30' }))).toHaveProperty('cameDownOn');
    expect(problems(typedListing({ closesOn: '2026-07-20' }))).toHaveProperty('closesOn');
    expect(problems(typedListing({ closesOn: '2027-07-20' }))).toHaveProperty('closesOn');
    expect(problems(typedListing({ lng: '' }))).toEqual({ lng: 'A pin needs both numbers, latitude and longitude.' });
    expect(problems(typedListing({ lat: '-90.8884', lng: '43.5561' }))).toEqual({ lat: expect.stringContaining('swapped') });
    expect(problems(typedListing({ gateWidth: '1 in' }))).toEqual({ gateWidth: 'Between 24 and 1200 in.' });
  });
  it('refuses more than it can hold instead of cutting it off', () => {
    expect(problems(typedListing({ logs: Array.from({ length: 201 }, () => typedLog()) }))).toEqual({ logs: 'At most 200 logs in one listing.' });
    expect(problems(typedListing({ note: 'x'.repeat(4001) }))).toHaveProperty('note');
  });
});

describe('the typed shape', () => {
  it('gathers posted fields into rows, whatever their numbers', () => {
    const typed = listingFromFields([['zip', '54665'], ['logs.10.smallEnd', '12'], ['logs.2.smallEnd', '14'], ['logs.2.id', 'a'], ['pieces.0.label', 'Bench'], ['deed', 'save'], ['logs.x.smallEnd', '9'], ['__proto__', 'no']]);
    expect(typed.logs.map(({ smallEnd }) => smallEnd)).toEqual(['14', '12']);
    expect(typed).toMatchObject({ zip: '54665', pieces: [{ label: 'Bench' }] });
    expect(typed).not.toHaveProperty('deed');
  });
  it('makes a form of anything that was stored', () => {
    expect(asListingTyped({ zip: 5, logs: ['x', { smallEnd: '3', extra: '4' }] })).toMatchObject({ zip: '', logs: [{ smallEnd: '3', length: '' }] });
    expect(asListingTyped(null)).toEqual(emptyListing());
  });
  it('knows a form that nobody has touched', () => {
    expect(isUntouched({ ...emptyListing(), closesOn: '2026-08-03', logs: [typedLog({ species: '', smallEnd: '', largeEnd: '', length: '' })] })).toBe(true);
    expect(isUntouched({ ...emptyListing(), note: 'x' })).toBe(false);
  });
});

describe('what a list says', () => {
  it('titles by species and count', () => {
    expect(listingTitle([{ species: 'white-oak' }])).toBe('White oak, 1 log');
    expect(listingTitle([{ species: 'red-pine' }, { species: 'white-oak' }, { species: 'white-oak' }])).toBe('White oak and red pine, 3 logs');
    expect(listingTitle(['red-pine', 'white-oak', 'white-ash'].map((species) => ({ species })))).toBe('Red pine and 2 other species, 3 logs');
  });
  it('sees a change in content, not in the order of keys', () => {
    const parts = { logs: [{ a: 1, b: 2 }], 'cut list': [], access: { x: 1, y: null }, 'metal risk': 'm', place: [1], landing: {}, 'slabs and sawdust': {}, 'how it came down': [], 'closing date': 'd', notes: '' };
    expect(changedParts(parts, { ...parts, logs: [{ b: 2, a: 1 }], access: { y: null, x: 1 } })).toEqual([]);
    expect(changedParts(parts, { ...parts, logs: [{ b: 2, a: 2 }], notes: 'n' })).toEqual(['logs', 'notes']);
  });
});
