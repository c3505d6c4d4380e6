import { describe, expect, it } from 'vitest';
import { projectOf, projectPieces, projects } from '~/domain/sawing/projects.ts';

const bed = projectOf('raised-bed');

describe('projects', () => {
  it('become pieces that cover what is built', () => {
    if (!bed) throw new Error('no raised bed');
    expect(projectPieces(bed, { lengthFt: 8, widthFt: 4, heightIn: 16 }, 0, false)).toEqual([
      { label: 'Bed, long sides', thicknessIn: 2, widthIn: 8, lengthFt: 8, count: 4, sizing: 'full-sawn' },
      { label: 'Bed, ends', thicknessIn: 2, widthIn: 8, lengthFt: 4, count: 4, sizing: 'full-sawn' },
      { label: 'Bed, corner posts', thicknessIn: 4, widthIn: 4, lengthFt: 1.5, count: 4, sizing: 'full-sawn' },
    ]);
    expect(projectPieces(bed, { lengthFt: 8, widthFt: 4, heightIn: 16 }, 10, true)[0]).toMatchObject({ count: 5, sizing: 'store-size' });
  });

  it.each(projects)('$name gives whole counts and sizes that can be sawn, at both ends of every field', (project) => {
    for (const end of ['least', 'most', 'usual'] as const) {
      const size = Object.fromEntries(project.fields.map((field) => [field.name, field[end]]));
      const pieces = projectPieces(project, size, 15, false);
      expect(pieces.length).toBeGreaterThan(0);
      for (const piece of pieces) {
        expect(Number.isInteger(piece.count) && piece.count > 0).toBe(true);
        expect(piece.lengthFt >= 0.5 && piece.lengthFt <= 20 && piece.widthIn >= piece.thicknessIn).toBe(true);
      }
    }
  });
});
