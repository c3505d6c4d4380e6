import { z } from 'zod';
import { between, positive, speciesCode } from './timber-fields.ts';

/** `POST /api/drying`; sizes are green. */
export const dryingRequest = z.strictObject({
  species: speciesCode,
  temperatureF: between(-40, 270, 'The temperature, in °F,'),
  relativeHumidityPct: between(0, 100, 'The relative humidity, in per cent,'),
  thicknessIn: positive(48, 'The thickness, in inches,'),
  widthIn: positive(120, 'The width, in inches,'),
  grain: z.enum(['flat', 'quarter'], { error: 'The grain is flat or quarter.' }),
});

export const dryingAnswer = z.object({
  equilibriumMoisturePct: z.number(),
  widthAtEquilibriumIn: z.number(),
  thicknessAtEquilibriumIn: z.number(),
  airDryingDays: z.object({ from: z.number(), to: z.number() }).nullable(),
  weightLbPerFt3: z.number(),
});
