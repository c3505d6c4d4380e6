/** Every case of a milling day that changes the money, its arithmetic written out (the project's own rules). */
import { describe, expect, it } from 'vitest';
import { checkClock, minutesOf, minutesOnClock } from '~/domain/trade/clock.ts';
import { chargedBlades, holdWarning, largerLogs, mayGoOnAfterMetal, setUpsAfterRain, tripsAfterRain } from '~/domain/trade/on-the-day.ts';
import { NO_WORK, priceWork } from '~/domain/trade/price.ts';
import { OAK_TERMS, termsWith } from '../../support/rate-cards.ts';

const came = { ...NO_WORK, setUps: 1, trips: 1 };
const cost = (terms: typeof OAK_TERMS, work: typeof NO_WORK) => priceWork(terms, work).costCents;

describe('a log larger than listed', () => {
  it('at exactly 15 % needs nobody, above it both', () => {
    expect(largerLogs([{ id: 'Log 1', listedBf: 200, measuredBf: 230, overLimits: [] }]).reasons).toEqual([]);
    expect(largerLogs([{ id: 'Log 1', listedBf: 200, measuredBf: 240, overLimits: [] }]).reasons).toHaveLength(2);
  });
  it('over the mill’s limits is said even when it scales the same, and a smaller log asks nothing', () => {
    expect(largerLogs([{ id: 'Log 3', listedBf: 200, measuredBf: 200, overLimits: ['the butt is 2 in too wide'] }]).reasons).toEqual(['Log 3: the butt is 2 in too wide']);
    expect(largerLogs([{ id: 'Log 1', listedBf: 200, measuredBf: 90, overLimits: [] }]).reasons).toEqual([]);
  });
});

describe('a rotten log', () => {
  it('is charged for opening it, by time to the quarter hour', () => {
    // 300 × 0.50 = 150 + 75 + 24 + 25 min → 0.5 h × 80.00 = 40.00 → 289.00; its board feet are simply not in the tally
    expect(cost(OAK_TERMS, { ...came, boardFeet: 300, cullOpeningMinutes: 25 })).toBe(28_900);
  });
  it('or by passes of the saw', () => {
    // 150 + 75 + 24 + 3 × 5.00 = 264.00
    expect(cost(termsWith({ cullOpening: { kind: 'pass', cents: 500 } }), { ...came, boardFeet: 300, cullPasses: 3 })).toBe(26_400);
  });
});

describe('metal', () => {
  it('stops the saw after two hits until the landowner allows more', () => {
    expect([0, 1, 2, 3].map((hits) => mayGoOnAfterMetal(hits, 0))).toEqual([true, true, false, false]);
    expect([2, 3].map((hits) => mayGoOnAfterMetal(hits, 1))).toEqual([true, false]);
  });
  it('is the landowner’s at the card’s two prices', () => {
    // 150 + 75 + 24 + 10.00 + 35.00 = 294.00
    expect(cost(OAK_TERMS, { ...came, boardFeet: 300, bladesResharpened: 1, bladesDestroyed: 1 })).toBe(29_400);
  });
  it('dulling and dirt are the sawyer’s, unless the logs were dragged', () => {
    const events = [{ blade: 're-sharpened', cause: 'dirt' }, { blade: 're-sharpened', cause: 'dulling' }, { blade: 'destroyed', cause: 'metal' }] as const;
    expect(chargedBlades(events, false)).toEqual({ bladesResharpened: 0, bladesDestroyed: 1 });
    expect(chargedBlades(events, true)).toEqual({ bladesResharpened: 2, bladesDestroyed: 1 });
  });
});

describe('logs added', () => {
  it('are a line of their own', () => {
    const job = priceWork(OAK_TERMS, { ...came, boardFeet: 300, addedBoardFeet: 85 });
    expect(job.lines.find(({ label }) => label === 'Sawing, logs added')?.amountCents).toBe(4_250); // 85 × 0.50
    expect(job.costCents).toBe(29_150); // 150 + 42.50 + 75 + 24
  });
});

describe('rain', () => {
  it('a partial tally stands: two days’ boards, one set-up, travel once', () => {
    // (180 + 220) × 0.50 = 200 + 75 + 24 = 299.00
    expect(cost(OAK_TERMS, { ...NO_WORK, boardFeet: 400, setUps: setUpsAfterRain(OAK_TERMS, 0), trips: tripsAfterRain(OAK_TERMS, 1) })).toBe(29_900);
  });
  it('travel again when the card says so, set-up again only when agreed', () => {
    const terms = termsWith({ travel: { freeMiles: 25, perMileCents: 200, owedAgainAfterRain: true } });
    // 200 + 75 + 2 × 24 = 323.00; with a second set-up 398.00
    expect(cost(terms, { ...NO_WORK, boardFeet: 400, setUps: setUpsAfterRain(terms, 0), trips: tripsAfterRain(terms, 1) })).toBe(32_300);
    expect(cost(terms, { ...NO_WORK, boardFeet: 400, setUps: setUpsAfterRain(terms, 1), trips: tripsAfterRain(terms, 1) })).toBe(39_800);
  });
});

describe('a short day, a late owner, undecked logs', () => {
  it('the minimum stands for a short day', () => {
    // 40 × 0.50 = 20 + 75 + 24 = 119 → 250.00
    expect(cost(termsWith({ minimum: { cents: 25_000, covers: 'whole-job' } }), { ...came, boardFeet: 40 })).toBe(25_000);
  });
  it('waiting is charged at the waiting rate, to the quarter hour', () => {
    // 300 × 0.50 = 150 + 75 + 24 + 1 h 10 min → 1.25 × 60.00 = 75.00 → 324.00
    expect(cost(OAK_TERMS, { ...came, boardFeet: 300, waitingMinutes: 70 })).toBe(32_400);
  });
});

describe('waste left or hauled against the bid', () => {
  const terms = termsWith({ extras: { ...OAK_TERMS.card.extras, wasteHauled: 5_000 } }, { waste: 'hauled' });
  it('hauled as the bid says is charged; left behind is not', () => {
    expect(cost(terms, { ...came, boardFeet: 300, wasteDone: 'hauled' })).toBe(29_900); // 150 + 75 + 24 + 50
    expect(cost(terms, { ...came, boardFeet: 300, wasteDone: 'left' })).toBe(24_900);
  });
  it('hauled against a bid to leave it is not charged', () => {
    expect(cost({ ...terms, waste: 'left' }, { ...came, boardFeet: 300, wasteDone: 'hauled' })).toBe(24_900);
  });
});

describe('the hold as the day goes on', () => {
  it('warns at 80 and 95 %, and stops at the limit', () => {
    expect([7_999, 8_000, 9_499, 9_500, 9_999, 10_000].map((so) => holdWarning(so, 10_000))).toEqual(['none', 'at-80', 'at-80', 'at-95', 'at-95', 'stop']);
  });
});

describe('the clock of an hourly basis', () => {
  const at = (time: string) => new Date(`2026-12-10T${time}:00-06:00`);
  const entries = [
    { activity: 'preparing', startsAt: at('08:00'), endsAt: at('08:40') },
    { activity: 'sawing', startsAt: at('08:40'), endsAt: at('11:00') },
    { activity: 'sharpening', startsAt: at('11:00'), endsAt: at('11:20') },
    { activity: 'waiting', startsAt: at('11:20'), endsAt: at('12:00') },
    { activity: 'breakdown', startsAt: at('12:00'), endsAt: at('13:00') },
    { activity: 'sawing', startsAt: at('13:00'), endsAt: at('15:05') },
  ] as const;
  it('counts sawing and waiting, from the first cut or from arrival, never the sawyer’s own stops', () => {
    expect(minutesOnClock(entries, 'first-cut')).toBe(140 + 40 + 125);
    expect(minutesOnClock(entries, 'arrival')).toBe(40 + 140 + 40 + 125);
    expect(minutesOf(entries, 'waiting')).toBe(40);
  });
  it('counts elapsed hours through the night the clocks change', () => {
    // 1 Nov 2026, Chicago: 00:30 CDT to 03:30 CST is four hours.
    expect(minutesOf([{ activity: 'sawing', startsAt: new Date('2026-11-01T00:30:00-05:00'), endsAt: new Date('2026-11-01T03:30:00-06:00') }], 'sawing')).toBe(240);
  });
  it('refuses an end before its start, an overlap and an endless day', () => {
    const refusals = checkClock([
      { activity: 'sawing', startsAt: at('09:00'), endsAt: at('08:00') },
      { activity: 'sawing', startsAt: at('10:00'), endsAt: at('12:00') },
      { activity: 'waiting', startsAt: at('11:00'), endsAt: at('11:30') },
    ]);
    expect(refusals).toMatchObject({ ok: false, problems: [{ path: '0.endsAt' }, { path: '2.startsAt' }] });
    expect(checkClock(entries).ok).toBe(true);
  });
});
