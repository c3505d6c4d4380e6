import { describe, expect, it } from 'vitest';
import { FEWEST_JOBS, learn, leftOut, MOST_JOBS, paceOf, type JobNote } from '~/domain/trade/mill-notes.ts';

const job = (change: Partial<JobNote> = {}): JobNote => ({ plannedBf: 1000, talliedBf: 900, sawingMinutes: 300, endedEarly: false, otherLogs: false, ...change });

describe('what a mill’s jobs say of it', () => {
  it('leaves the first figures alone until two jobs count', () => {
    expect(learn([], 200)).toEqual({ yieldShare: 0.85, yieldJobs: 0, paceBfPerHour: 200, paceJobs: 0 });
    expect(learn([job()], 200)).toEqual({ yieldShare: 0.85, yieldJobs: 1, paceBfPerHour: 200, paceJobs: 1 });
    expect(FEWEST_JOBS).toBe(2);
  });

  it('adds what was sawn to the weight of the first figures', () => {
    // Yield: (0.85 × 1,500 + 900 + 900) / (1,500 + 2,000) = 3,075 / 3,500 = 0.8786.
    // Pace: (200 × 10 + 1,800) / (10 + 5 + 5) = 3,800 / 20 = 190 bf an hour.
    const learned = learn([job(), job()], 200);
    expect(learned.yieldShare).toBeCloseTo(0.87857, 5);
    expect(learned.paceBfPerHour).toBe(190);
  });

  it('lets a small job weigh less than a large one', () => {
    const small = job({ plannedBf: 60, talliedBf: 30, sawingMinutes: 0 });
    // (1,275 + 900 + 30) / (1,500 + 1,000 + 60) = 2,205 / 2,560.
    expect(learn([job(), small], 200).yieldShare).toBeCloseTo(2205 / 2560, 6);
  });

  it('comes nearer to the mill’s own record with every job, and never passes it', () => {
    const shares = Array.from({ length: MOST_JOBS + 1 }, (_, count) => learn(Array.from({ length: count }, () => job({ talliedBf: 1000 })), 200).yieldShare);
    for (let count = FEWEST_JOBS + 1; count <= MOST_JOBS; count += 1) expect(shares[count]).toBeGreaterThan(shares[count - 1] ?? 1);
    expect(shares.at(-1)).toBeLessThan(1);
  });

  it('looks at the latest twelve only', () => {
    const latest = Array.from({ length: MOST_JOBS }, () => job());
    expect(learn([...latest, job({ talliedBf: 500 })], 200)).toEqual(learn(latest, 200));
  });

  it.each([
    ['a job that ended early', { endedEarly: true }, /early/],
    ['logs that no plan knew', { otherLogs: true }, /added/],
    ['a tally far over the plan', { talliedBf: 1301 }, /far from/],
    ['a tally far under it', { talliedBf: 399 }, /far from/],
    ['hardly anything planned', { plannedBf: 49, talliedBf: 45 }, /too little/],
  ])('says why it leaves out %s', (_what, change, why) => {
    expect(leftOut(job(change))).toMatch(why);
    expect(learn([job(change), job(), job()], 200).yieldJobs).toBe(2);
  });

  it('takes a pace only from hours that were entered', () => {
    expect(paceOf(job())).toBe(180);
    expect(paceOf(job({ sawingMinutes: 0 }))).toBeNull();
    expect(paceOf(job({ sawingMinutes: 29 }))).toBeNull();
    expect(learn([job({ sawingMinutes: 0 }), job()], 200)).toMatchObject({ paceBfPerHour: 200, paceJobs: 1, yieldJobs: 2 });
  });
});
