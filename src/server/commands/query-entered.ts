import { TallyQuery } from '../models/tally.ts';
import type { TallyWork } from '../tally-work.ts';

type Named = readonly [line: 'board' | 'hit' | 'cull' | 'clock' | 'extras', lineId: string | null, as: string];

const linesOf = ({ boards, hits, culls, clock, job }: TallyWork): readonly Named[] => [
  ...boards.map(({ id }): Named => ['board', id, '']),
  ...hits.map(({ id }): Named => ['hit', id, '']),
  ...culls.map(({ id }): Named => ['cull', id, '']),
  ...clock.map((entry): Named => ['clock', entry.id, JSON.stringify(entry)]),
  ['extras', null, JSON.stringify(job.extras)],
];

/**
 * Queries what a sawyer entered or changed in a queried tally, in nobody's words: the landowner has not read it, and what they query is all
 * that a moderator would decide on. To be called in the transaction that changed it.
 */
export async function queryEntered(before: TallyWork, after: TallyWork, at: Date): Promise<void> {
  const known = new Set(linesOf(before).map((line) => line.join(' ')));
  for (const named of linesOf(after)) {
    if (known.has(named.join(' '))) continue;
    const [line, lineId] = named;
    const query = { tallyId: after.tally.id, line, lineId, decidedAt: null };
    if ((await TallyQuery.count({ where: query })) === 0) await TallyQuery.create({ ...query, says: '', createdAt: at });
  }
}
