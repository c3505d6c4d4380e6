import { describe, expect, it } from 'vitest';
import { cautionSource } from '~/domain/cautions.ts';
import { dangersOf, woodCautions } from '~/domain/listing/cautions.ts';
import { asListingTyped, typedOver } from '~/domain/listing/draft.ts';
import { figuresOf, totalFigures } from '~/domain/listing/figures.ts';
import { nextStep } from '~/domain/listing/next-step.ts';
import { accessSaid, landingSaid } from '~/domain/listing/page-words.ts';
import { dressedSize, pieceBoardFeet, pieceSaid, pieceSize } from '~/domain/listing/piece-words.ts';

const oak = { species: 'white-oak', smallEndIn: 16, largeEndIn: null, lengthFt: 12, defects: [] };

describe('what a log comes to', () => {
  it('by the published tables of the three rules', () => {
    // 16 in × 12 ft: International ¼ 130, Scribner Decimal C 120, Doyle 108, as their tables print them.
    expect(figuresOf(oak).boardFeet).toEqual({ internationalQuarter: 130, scribnerDecimalC: 120, doyle: 108 });
  });
  it('with a range that reaches further down than up, and the bark in the weight', () => {
    const total = totalFigures([oak, { ...oak, defects: [{ kind: 'section', lengthFt: 6 }] }]);
    // 15 in × 12 ft is 115 bf and 17 in (16 1/2 rounds up) 150 bf in the published International ¼ table; half of the second log is cut off.
    expect(total).toMatchObject({ low: 115 + 60, high: 150 + 75, boardFeet: { internationalQuarter: 130 + 65 } });
    expect(figuresOf(oak).weightLb).toBeCloseTo(total.weightLb / 2, 6);
  });
});

describe('a piece of the cut list', () => {
  const joist = { thicknessIn: 2, widthIn: 8, lengthFt: 10, count: 12, sizing: 'store-size' as const };
  it('is said with what a store size measures (PS 20: 2 × 8 is 1 1/2 × 7 1/4 in dry)', () => {
    expect(pieceSize(joist)).toBe('2 × 8 in × 10 ft');
    expect(dressedSize(joist)).toBe('1 1/2 × 7 1/4 in');
    expect(pieceBoardFeet(joist)).toBe(160);
    expect(pieceSaid(joist)).toBe('160 bf lumber tally on the written size; planed and dry 1 1/2 × 7 1/4 in');
  });
  it('speaks of hardwood in quarters, and of sizes no store has', () => {
    expect(pieceSize({ ...joist, thicknessIn: 1.25, widthIn: 6.5, sizing: 'full-sawn' })).toBe('5/4 × 6 1/2 in × 10 ft');
    expect(pieceSaid({ ...joist, widthIn: 9 })).toContain('not a size stores list');
  });
});

describe('what is dangerous', () => {
  const calm = { howDown: 'felled', lines: 'none', slope: 'level', metalRisk: 'none-known', forDwelling: false };
  it('is nothing on calm ground, and everything at once, the gravest first', () => {
    expect(dangersOf(calm)).toEqual([]);
    expect(dangersOf({ howDown: 'snapped', lines: 'down', slope: 'steep', metalRisk: 'fence-line', forDwelling: true }).map(({ title }) => title)).toEqual(['A line is down', 'A snapped tree', 'Steep ground', 'Metal in the wood', 'Lumber for a dwelling']);
    for (const { cautions } of dangersOf({ ...calm, howDown: 'uprooted', lines: 'unknown' })) {
      expect(cautions.length).toBeGreaterThan(0);
      for (const caution of cautions) expect(cautionSource(caution)).toMatch(/\.$/);
    }
  });
  it('comes from the wood too: oak in spring, walnut shavings, quarantines', () => {
    const said = (species: string[], day: string): string => woodCautions(species, day)?.cautions.map(({ text }) => text).join(' ') ?? '';
    expect(said(['white-oak'], '2026-05-01')).toContain('spread oak wilt');
    expect(said(['white-oak'], '2026-11-01')).not.toContain('spread oak wilt');
    expect(said(['black-walnut'], '2026-11-01')).toContain('founder a horse');
    expect(said(['white-oak', 'black-walnut'], '2026-11-01').match(/Quarantines/g)).toHaveLength(1);
    expect(woodCautions(['no-such-tree'], '2026-11-01')).toBeNull();
  });
});

describe('how a listing stands', () => {
  const base = { number: 1042, closesAt: new Date('2026-08-11T05:00:00Z'), lapsesAt: new Date('2026-08-18T05:00:00Z'), timeZone: 'America/Chicago', isHidden: false, openBids: 0, toConfirm: 0, booking: null };
  it('says the one thing to do next', () => {
    expect(nextStep({ ...base, status: 'draft' }).action).toEqual({ label: 'Go on and publish', href: '/listings/1042/edit' });
    // Midnight at the end of Monday, 10 August in Wisconsin.
    expect(nextStep({ ...base, status: 'open' })).toEqual({ words: 'No bids to choose from yet. Open until Mon 10 Aug.' });
    expect(nextStep({ ...base, status: 'open', openBids: 1, toConfirm: 2 })).toEqual({ words: 'Open until Mon 10 Aug. 2 bids to be confirmed by the sawyer.', action: { label: 'Compare 1 bid', href: '/listings/1042/bids' } });
    expect(nextStep({ ...base, status: 'closed', openBids: 3 })).toMatchObject({ words: 'Choose by Tue 18 Aug, 12:00 am CDT.', action: { label: 'Compare 3 bids' } });
    expect(nextStep({ ...base, status: 'matched', booking: 5001 }).action?.href).toBe('/bookings/5001');
    expect(nextStep({ ...base, status: 'lapsed' }).action?.href).toBe('/listings/new?from=1042');
    expect(nextStep({ ...base, status: 'open', isHidden: true }).words).toContain('moderator');
  });
});

describe('the words of the page', () => {
  it('leave no question unanswered', () => {
    const access = accessSaid({ truck: 'truck-only', gateWidthIn: 102, slope: 'gentle', lines: 'unknown', machine: 'other', machineNote: 'A winch', water: 'no', helpers: 0 });
    expect(access.map(({ value }) => value)).toEqual(['Truck without a trailer to the logs', '8 ft 6 in', 'Gentle slope', 'Not known whether there are overhead lines', 'Another machine on site', 'No water at the landing', 'None']);
    expect(access.find(({ label }) => label === 'Machine')?.note).toBe('A winch');
    const landing = landingSaid({ pad: true, offDirt: false, parallel: true, rolling: false, reDecks: 'sawyer', note: '' }, { slabs: 'hauled', sawdust: 'left' });
    expect(landing.map(({ value }) => value)).toEqual(['Yes', 'No', 'Yes', 'No', 'The sawyer moves the logs to the mill', 'Slabs hauled away', 'Sawdust stays']);
  });
});

describe('what was typed into a form', () => {
  const opened = asListingTyped({ note: 'as saved', zip: '54665', logs: [{ id: 'a', smallEnd: '15' }], pieces: [{ label: 'bench' }] });
  const kept = asListingTyped({ note: 'kept by the browser', zip: '54601', logs: [{ id: 'a', smallEnd: '16' }], pieces: [] });
  it('leaves the other text as it is when nothing was typed', () => {
    expect(typedOver(opened, asListingTyped(opened), kept)).toBe(kept);
  });
  it('goes over the other text answer by answer, rows as a whole', () => {
    const now = asListingTyped({ ...opened, note: 'typed', logs: [{ id: 'a', smallEnd: '15', length: '11' }] });
    expect(typedOver(opened, now, kept)).toEqual({ ...kept, note: 'typed', logs: now.logs });
  });
  it('keeps an answer that was emptied', () => {
    expect(typedOver(opened, asListingTyped({ ...opened, zip: '' }), kept)).toEqual({ ...kept, zip: '' });
  });
});
