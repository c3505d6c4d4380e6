import { z } from 'zod';
import { certificateKinds } from '~/domain/certificate.ts';
import { parseDay } from '~/domain/time.ts';
import { fieldOf, text } from './fields.ts';

const reasonOf = (missing: string) => fieldOf(text(1000, missing));

/** Reasons that the person concerned reads. */
export const reasonForm = z.object({ reason: reasonOf('Write the reason: the person concerned reads it.') });
/** Reasons that stay in the audit log. */
export const noteForm = z.object({ reason: reasonOf('Write why: it stays in the audit log.') });
export const endSecondFactorForm = z.object({ sure: reasonOf('Write how you made sure: it stays in the audit log.') });
export const outcomeForm = z.object({ outcome: reasonOf('Write what came of it: it stays at the desk.') });
export const offerForm = z.object({ note: reasonOf('Write why: the landowner reads it beside the tally.') });

const expiryDay = fieldOf(parseDay);
const kind = z.enum(certificateKinds);
/** `sentAt` names the paper that was looked at, so that a newer one is not taken for it. */
export const certificateForm = z.object({ kind, expiresOn: expiryDay, sentAt: z.string().max(40).default('') });
export const certificateRefusedForm = z.object({ kind, refusal: reasonOf('Write why: the sawyer reads it.'), sentAt: z.string().max(40).default('') });
export const handInForm = z.object({ kind, file: z.uuid('Choose the file first.'), saysUntil: expiryDay });
