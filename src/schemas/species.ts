import { z } from 'zod';

const shrinkage = z.number().nullable();

/** `GET /api/species` */
export const speciesAnswer = z.array(
  z.object({
    code: z.string(),
    name: z.string(),
    scientificName: z.string(),
    aliases: z.array(z.string()),
    group: z.enum(['hardwood', 'softwood']),
    greenDensityLbPerFt3: z.number(),
    specificGravityGreen: z.number(),
    greenMoisturePct: z.number(),
    barkPct: z.number(),
    shrinkagePct: z.object({ radial: shrinkage, tangential: shrinkage, volumetric: shrinkage }),
  }),
);
