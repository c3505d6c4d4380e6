/** Every case of a milling day that changes the money, its arithmetic written out (the project's own rules). */
import { describe, expect, it } from 'vitest';
import { checkClock, minutesOf, minutesOnClock } from '~/domain/trade/clock.ts';
import { chargedBlades, holdWarning, largerLogs, mayGoOnAfterMetal, setUpsAfterRain, tripsAfterRain } from '~/domain/trade/on-the-day.ts';
import { jobOf } from '~/domain/trade/day-job.ts';
import { logToCharge } from '~/domain/trade/bid-estimate.ts';
import { settle } from '~/domain/trade/settlement.ts';
import { countTally, NO_EXTRAS } from '~/domain/trade/tally-count.ts';
import { NO_WORK, priceWork } from '~/domain/trade/price.ts';
import { OAK_TERMS, termsWith } from '../../support/rate-cards.ts';

const oak = (id: string, smallEndIn: number) => logToCharge({ id, species: 'white-oak', smallEndIn, lengthFt: 12 });
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

describe('boards out of size', () => {
  it('are recorded, at nothing', () => {
    const row = { logId: 'log-1', thicknessIn: 1, widthIn: 8, lengthFt: 12 };
    const work = countTally(OAK_TERMS, { boards: [{ ...row, kind: 'board', count: 20 }, { ...row, kind: 'out-of-size', count: 5 }], clock: [], blades: [], culls: [], extras: NO_EXTRAS }, [oak('log-1', 18)]);
    // 20 × 8 bf × 0.50 = 80 + 75 + 24 = 179.00; the five are in the tally and cost nothing.
    expect(cost(OAK_TERMS, work)).toBe(17_900);
  });
});

describe('a log that was added and never accepted, or declined', () => {
  it('costs nothing, whatever was sawn from it', () => {
    const boards = [{ kind: 'board', logId: 'added', thicknessIn: 1, widthIn: 8, lengthFt: 12, count: 10 }, { kind: 'board', logId: 'log-1', thicknessIn: 1, widthIn: 8, lengthFt: 12, count: 20 }] as const;
    const lines = { boards, hits: [], culls: [], clock: [], extras: NO_EXTRAS, allowances: [] };
    const job = (agreed: boolean) => jobOf({ ...lines, logs: [{ id: 'log-1', added: false, agreed: false }, { id: 'added', added: true, agreed }] });
    const logs = [oak('log-1', 18), oak('added', 12)];
    // 160 × 0.50 = 80 + 75 + 24 = 179.00; accepted, 80 bf more at 0.50 = 40.00: 219.00.
    expect([cost(OAK_TERMS, countTally(OAK_TERMS, job(false), logs)), cost(OAK_TERMS, countTally(OAK_TERMS, job(true), logs))]).toEqual([17_900, 21_900]);
  });
});

describe('a sawyer who leaves early or breaks down', () => {
  const rest = { clock: [], blades: [], culls: [], extras: NO_EXTRAS };
  const money = { heldCents: 40_000, feeBasisPoints: 500 };
  it('charges the tally and the journey once; an opened cant that gave no board is the owner’s and costs nothing', () => {
    const terms = termsWith({ basis: { kind: 'log-scale', rule: 'internationalQuarter', smallestLog: null, perBf: { withCents: 50, withoutCents: 50 } }, minimum: { cents: 25_000, covers: 'whole-job' } });
    const work = countTally(terms, { ...rest, boards: [{ kind: 'board', logId: 'log-1', thicknessIn: 1, widthIn: 8, lengthFt: 12, count: 9 }] }, [oak('log-1', 18), oak('opened', 16)]);
    // Only the log that gave boards: 170 bf × 0.50 = 85 + travel 24 = 109.00; no set-up, no minimum of 250. Fee 5.45.
    expect(settle(terms, work, money, { endedBySawyer: true })).toMatchObject({ costCents: 10_900, feeCents: 545, transferCents: 10_355, refundCents: 29_100 });
  });
  it('leaves the breakdown off the clock', () => {
    const terms = termsWith({ basis: { kind: 'hourly', from: 'first-cut', perHour: { withCents: 10_000, withoutCents: 8_000 } } });
    const clock = [['sawing', '08:00', '10:20'], ['breakdown', '10:20', '12:00']].map(([activity, from, to]) => ({ activity: activity as 'sawing' | 'breakdown', startsAt: new Date(`2026-08-04T${from}:00Z`), endsAt: new Date(`2026-08-04T${to}:00Z`) }));
    const work = countTally(terms, { ...rest, clock, boards: [] }, []);
    // 2 h 20 min → 2.25 h × 80.00 = 180 + travel 24 = 204.00.
    expect(settle(terms, work, money, { endedBySawyer: true }).costCents).toBe(20_400);
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
