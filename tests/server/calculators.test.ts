import { describe, expect, it } from 'vitest';
import { calculate } from '~/server/http/calculate.ts';
import { countMore } from '~/server/http/limits.ts';
import { planLog } from '~/server/services/planning.ts';

const from = (address: string): Request => new Request('http://localhost/api/saw-plan', { headers: { 'x-client-address': address } });
const plain = { log: { smallEndIn: 8, lengthFt: 8 }, mill: { kerfIn: 0.125 }, pattern: 'live' as const, pieces: [{ thicknessIn: 1 }] };

describe('the calculators that are for anyone', () => {
  it('have an end to what one address uses up, whichever of its network’s addresses it asks from', async () => {
    expect((await calculate(from('2001:db8::1'), (asker) => planLog(plain, asker))).boards.length).toBeGreaterThan(0);
    await countMore('planning', '2001:db8:0:0::/64', 240);
    await expect(calculate(from('2001:db8::2'), (asker) => planLog(plain, asker))).rejects.toMatchObject({ kind: 'tooMany' });
    expect((await calculate(from('192.0.2.1'), (asker) => planLog(plain, asker))).boards.length).toBeGreaterThan(0);
  });

  it('count what took long, also when it failed', async () => {
    await expect(calculate(from('192.0.2.2'), () => new Promise((_, reject) => setTimeout(() => reject(new Error('late')), 1100)))).rejects.toThrow('late');
    await countMore('planning', '192.0.2.2', 238);
    await expect(calculate(from('192.0.2.2'), async () => 'done')).rejects.toMatchObject({ kind: 'tooMany' });
  });

  it('never keep more than two plans of one asker', async () => {
    const asked = await Promise.allSettled([1, 2, 3].map(() => planLog(plain, 'one')));
    expect(asked.map(({ status }) => status)).toEqual(['fulfilled', 'fulfilled', 'rejected']);
  });
});
