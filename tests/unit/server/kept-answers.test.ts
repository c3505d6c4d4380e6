import { beforeEach, expect, it } from 'vitest';
import { KeptAnswers } from '~/server/kept-answers.ts';

let now = 0;
let kept: KeptAnswers<number>;
let worked = 0;

/** Takes so many ms of the test's own clock, and counts how often it was done. */
const taking = (ms: number) => async (): Promise<number> => {
  await Promise.resolve();
  now += ms;
  worked += 1;
  return worked;
};

beforeEach(() => {
  now = 0;
  worked = 0;
  kept = new KeptAnswers({ costlyMs: 30, freshMs: 1000, staleMs: 5000, most: 2 }, () => now);
});

it('cheap answers are worked out each time', async () => {
  for (const turn of [1, 2, 3]) expect(await kept.get('a', taking(29))).toBe(turn);
  expect(kept.has('a')).toBe(false);
});

it('costly ones are kept while they are fresh, and each key for itself', async () => {
  expect(await kept.get('a', taking(30))).toBe(1);
  now += 999;
  expect([kept.has('a'), await kept.get('a', taking(30)), await kept.get('b', taking(30))]).toEqual([true, 1, 2]);
});

it('stale ones are given once more while the new one is worked out', async () => {
  await kept.get('a', taking(30));
  now += 1500;
  expect([kept.has('a'), await kept.get('a', taking(40))]).toEqual([false, 1]);
  await Promise.resolve();
  expect(await kept.get('a', taking(40))).toBe(2);
  now += 7000;
  expect(await kept.get('a', taking(40))).toBe(3);
});

it('those who ask at the same time share one', async () => {
  expect(await Promise.all([1, 2, 3].map(() => kept.get('a', taking(50))))).toEqual([1, 1, 1]);
});

it('a failure is nobody’s answer: the next asks anew, and an old answer stays', async () => {
  const failing = () => Promise.reject(new Error('no'));
  await expect(kept.get('a', failing)).rejects.toThrow('no');
  expect(await kept.get('a', taking(30))).toBe(1);
  now += 1500;
  expect(await kept.get('a', failing)).toBe(1);
  expect(await kept.get('a', taking(30))).toBe(1);
});

it('the one asked for longest ago gives way', async () => {
  await kept.get('a', taking(30));
  await kept.get('b', taking(30));
  await kept.get('a', taking(30));
  await kept.get('c', taking(30));
  expect(['a', 'b', 'c'].map((key) => kept.has(key))).toEqual([true, false, true]);
});
