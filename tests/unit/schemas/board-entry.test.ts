import { describe, expect, it } from 'vitest';
import { boardEntry } from '~/islands/tally-book/count.ts';
import { tallyEntry } from '~/schemas/tally-entries.ts';

describe('an entry of boards', () => {
  it('is one that the server takes, whatever else came with the size', () => {
    // As a piece still wanted has it: the entry's schema refuses fields that it does not know.
    const wanted = { label: 'Bench seat', thicknessIn: 2, widthIn: 9, lengthFt: 8, left: 6 };
    const entry = boardEntry(wanted, { logId: null, kind: 'board', secondWidthIn: 8, count: 2 });
    expect(tallyEntry.parse(entry)).toMatchObject({ kind: 'board', boardKind: 'board', thicknessIn: 2, widthIn: 9, lengthFt: 8, secondWidthIn: null, count: 2 });
  });

  it('has a second width only for a slab', () => {
    expect(tallyEntry.parse(boardEntry({ thicknessIn: 2.5, widthIn: 14, lengthFt: 8 }, { logId: null, kind: 'slab', secondWidthIn: 16, count: 1 }))).toMatchObject({ boardKind: 'slab', secondWidthIn: 16 });
  });
});
