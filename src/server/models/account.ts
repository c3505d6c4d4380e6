import type { AccountState } from '~/domain/states/account.ts';
import { filled, id, instant, keyRef, keyText, nullable, ref, table, text, whole, yes, type Row } from './table.ts';

export const Account = table('account', {
  id: id(),
  email: text(),
  emailConfirmedAt: nullable(instant()),
  passwordHash: text(),
  name: text(),
  isLandowner: filled(yes()),
  isSawyer: filled(yes()),
  isModerator: filled(yes()),
  status: filled(text<AccountState>()),
  suspendedReason: nullable(text()),
  totpSecret: nullable(text()),
  totpConfirmedAt: nullable(instant()),
  totpLastStep: nullable(whole()),
  zip: nullable(text()),
  termsVersion: nullable(text()),
  termsAcceptedAt: nullable(instant()),
  createdAt: instant(),
  closedAt: nullable(instant()),
});
export type Account = Row<typeof Account>;

export const Session = table('session', {
  idHash: keyText(),
  publicId: filled(ref()),
  accountId: ref(),
  expiresAt: instant(),
  createdAt: instant(),
  lastSeenAt: instant(),
  secondFactorAt: nullable(instant()),
  userAgent: filled(text()),
});
export type Session = Row<typeof Session>;

export type TokenPurpose = 'confirm-email' | 'change-email' | 'reset-password';

export const EmailToken = table('email_token', {
  hash: keyText(),
  accountId: ref(),
  purpose: text<TokenPurpose>(),
  email: text(),
  expiresAt: instant(),
  usedAt: nullable(instant()),
  createdAt: instant(),
});

export const TermsAcceptance = table('terms_acceptance', { accountId: keyRef(), version: keyText(), acceptedAt: instant() });

export const AccountBlock = table('account_block', { blockerId: keyRef(), blockedId: keyRef(), createdAt: instant() });

export type ReportedThing = 'listing' | 'message' | 'account' | 'photo' | 'review';

export const Report = table('report', {
  id: id(),
  reporterId: nullable(ref()),
  thing: text<ReportedThing>(),
  thingId: ref(),
  reason: text(),
  note: filled(text()),
  createdAt: instant(),
  handledAt: nullable(instant()),
  handledBy: nullable(ref()),
  outcome: nullable(text()),
});
