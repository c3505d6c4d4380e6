import { z } from 'zod';
import { good, refused, type Result } from '~/domain/result.ts';
import { choice, fieldOf, list, optional, text, ticked } from './fields.ts';

const address = z.email();

/** An e-mail address, at most 254 characters (RFC 5321). */
const emailAddress = (typed: string): Result<string> =>
  typed.length <= 254 && address.safeParse(typed).success ? good(typed) : refused('', typed === '' ? 'Write your e-mail address.' : 'Write an e-mail address, like name@example.org.');

const zipCode = (typed: string): Result<string> => (/^\d{5}$/.test(typed) ? good(typed) : refused('', 'Write a ZIP of five digits, like 54665.'));

/** What an account works as. */
export const roleNames = ['landowner', 'sawyer'] as const;
export type RoleName = (typeof roleNames)[number];

const roles = list.transform((typed, ctx): RoleName[] => {
  const chosen = roleNames.filter((role) => typed.includes(role));
  if (chosen.length === 0) ctx.addIssue({ code: 'custom', message: 'Say what you have: logs, a mill, or both.' });
  return chosen;
});

const easy = /^(.)\1*$|^(?:0?123456789\d*|9876543210?|abcdefghij[a-z]*|qwertyuiop.*|password.*)$/i;

/** A new password: 10 to 200 characters, nothing trimmed, no rule about kinds of characters (NIST SP 800-63B, 5.1.1.2, from memory). */
const newPassword = z.string().default('').transform((typed, ctx): string => {
  const say = (message: string): void => ctx.addIssue({ code: 'custom', message });
  if (typed.length < 10) say('Use at least 10 characters. A few words in a row are easy to remember.');
  else if (typed.length > 200) say('Keep it to 200 characters.');
  else if (easy.test(typed)) say('That one is too easily guessed. A few unrelated words in a row are better.');
  return typed;
});

/** The password in use, to show that it is really you. */
const password = z.string().default('').transform((typed, ctx): string => {
  if (typed === '') ctx.addIssue({ code: 'custom', message: 'Write your password.' });
  return typed.slice(0, 1000);
});

const code = fieldOf((typed) => (/^\d{3}\s?\d{3}$/.test(typed) ? good(typed.replace(/\s/g, '')) : refused('', 'Write the six digits that your authenticator app shows now.')));
const name = fieldOf(text(120, 'Write the name that others will see.'));
const next = z.string().optional();

/** In the order of the form, so that what is wrong is listed in it. */
export const signUpForm = z.object({
  as: roles,
  name,
  email: fieldOf(emailAddress),
  password: newPassword,
  zip: fieldOf(optional(zipCode)),
  terms: ticked.refine((yes) => yes, 'Read and accept the terms to go on.'),
  next,
});

export const signInForm = z.object({ email: fieldOf(emailAddress), password, next });
export const secondFactorForm = z.object({ code, next });
export const forgotPasswordForm = z.object({ email: fieldOf(emailAddress) });
export const resetPasswordForm = z.object({ newPassword });

export const accountForm = z.object({ name, as: roles, zip: fieldOf(optional(zipCode)) });
/** A moderator need be neither landowner nor sawyer. */
export const moderatorForm = accountForm.extend({ as: list.transform((typed) => roleNames.filter((role) => typed.includes(role))) });

export const changePasswordForm = z.object({ currentPassword: password, newPassword });
export const changeEmailForm = z.object({ newEmail: fieldOf(emailAddress), emailPassword: password });
/** `sealed` is the new secret as the page sealed it, so that nothing is stored until a code proves that the app has it. */
export const turnOnSecondFactorForm = z.object({ sealed: z.string().max(500).default(''), code });
export const turnOffSecondFactorForm = z.object({ offPassword: password, offCode: code });

export const endSessionForm = z.object({ session: z.uuid('Choose a session from the list.') });
export const closeAccountForm = z.object({ password, sure: ticked.refine((yes) => yes, 'Tick the box to show that you mean it.') });
export const unblockForm = z.object({ account: z.uuid('Choose a person from the list.') });

export const reportReasons = {
  scam: 'Asks for money outside Skidway, or looks like a trick',
  'not-theirs': 'The tree or the photographs are not theirs',
  unsafe: 'Unsafe: somebody could get hurt',
  rude: 'Threatening, insulting or discriminating',
  private: "Shows someone's private details",
  other: 'Something else',
} as const;
export type ReportReason = keyof typeof reportReasons;

export const reportForm = z.object({
  reason: fieldOf(choice(Object.keys(reportReasons) as ReportReason[], 'Choose what is wrong.')),
  note: fieldOf(text(2000)),
});
