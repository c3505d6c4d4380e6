import { z } from 'zod';
import { between } from './timber-fields.ts';

/** `POST /api/tree-volume`; which cells the table holds is the rule's own answer (`domain/timber/tree-volume.ts`). */
export const treeVolumeRequest = z.strictObject({
  rule: z.enum(['internationalQuarter', 'doyle'], { error: 'The rule is internationalQuarter or doyle.' }),
  dbhIn: between(0, 1000, 'The diameter at breast height, in inches,'),
  logs16ft: between(0, 100, 'The number of 16-ft logs'),
});

export const treeVolumeAnswer = z.object({ boardFeet: z.number() });
