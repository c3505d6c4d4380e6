import fc from 'fast-check';
import type { Defect } from '~/domain/timber/defects.ts';
import type { LogInput } from '~/domain/timber/estimate.ts';
import { speciesCodes } from '~/domain/timber/species.ts';

const inches = (min: number, max: number): fc.Arbitrary<number> => fc.integer({ min: min * 16, max: max * 16 }).map((parts) => parts / 16);

export const defects: fc.Arbitrary<Defect> = fc.oneof(
  fc.record({ kind: fc.constant('section' as const), lengthFt: inches(1, 40) }),
  fc.record({ kind: fc.constant('wedge' as const), lengthFt: inches(1, 40), angleDeg: fc.integer({ min: 1, max: 360 }) }),
  fc.record({ kind: fc.constant('sweep' as const), departureIn: inches(0, 60) }),
  fc.record({ kind: fc.constant('crook' as const), deflectionIn: inches(0, 60), lengthFt: inches(1, 40) }),
  fc.record({ kind: fc.constant('interiorRot' as const), widthIn: inches(1, 80), heightIn: inches(1, 80), lengthFt: inches(1, 40) }),
  fc.record({ kind: fc.constant('squared' as const), widthIn: inches(1, 80), heightIn: inches(1, 80), lengthFt: inches(1, 40) }),
);

/** Any log the product accepts, to a sixteenth of an inch. */
export const logs: fc.Arbitrary<LogInput> = fc
  .record({
    species: fc.constantFrom(...speciesCodes),
    smallEndIn: inches(4, 60),
    taperIn: fc.option(inches(0, 20)),
    lengthFt: inches(4, 40),
    defects: fc.array(defects, { maxLength: 4 }),
  })
  .map(({ taperIn, ...log }) => (taperIn === null ? log : { ...log, largeEndIn: log.smallEndIn + taperIn }));
