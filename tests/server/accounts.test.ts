import { createHash } from 'node:crypto';
import { generateSync } from 'otplib';
import { beforeEach, describe, expect, it } from 'vitest';
import { closeAccountForm, signUpForm } from '~/schemas/account-forms.ts';
import { termsVersion } from '~/domain/terms.ts';
import { ownPath } from '~/domain/own-path.ts';
import { acceptTerms } from '~/server/commands/accept-terms.ts';
import { askPasswordReset } from '~/server/commands/ask-password-reset.ts';
import { blockAccount, unblockAccount } from '~/server/commands/block-account.ts';
import { changeAccount } from '~/server/commands/change-account.ts';
import { changeEmail } from '~/server/commands/change-email.ts';
import { changePassword } from '~/server/commands/change-password.ts';
import { closeAccount } from '~/server/commands/close-account.ts';
import { confirmEmail } from '~/server/commands/confirm-email.ts';
import { endOneSession, endOtherSessions } from '~/server/commands/end-sessions.ts';
import { giveSecondFactor } from '~/server/commands/give-second-factor.ts';
import { resetPassword } from '~/server/commands/reset-password.ts';
import { sendConfirmation } from '~/server/commands/send-confirmation.ts';
import { signIn } from '~/server/commands/sign-in.ts';
import { signUp } from '~/server/commands/sign-up.ts';
import { turnOffSecondFactor } from '~/server/commands/turn-off-second-factor.ts';
import { turnOnSecondFactor } from '~/server/commands/turn-on-second-factor.ts';
import { blockedBetween } from '~/server/blocks.ts';
import { execute, oneRow, rows } from '~/server/db.ts';
import { Account, EmailToken, Event, Session, TermsAcceptance } from '~/server/models/index.ts';
import { passwordMatches } from '~/server/passwords.ts';
import { countMore } from '~/server/http/limits.ts';
import { pendingAccount, pendingFor } from '~/server/pending-sign-in.ts';
import { accountExport } from '~/server/queries/account-export.ts';
import { sessionsOf } from '~/server/queries/account.ts';
import { seal, unseal } from '~/server/sealing.ts';
import { codeStep, newSecondFactor, sealSecret } from '~/server/second-factor.ts';
import { openSession, viewerOf } from '~/server/sessions.ts';
import type { Viewer } from '~/server/viewer.ts';
import { viewerFor } from '../support/cast.ts';

const at = new Date('2026-07-20T15:00:00Z');
const later = (minutes: number): Date => new Date(at.getTime() + minutes * 60_000);
const PASSWORD = 'nine red oak boards';
let count = 0;

/** Letters waiting in the queue to an address, newest first. */
const lettersTo = async (email: string): Promise<{ subject: string; text: string }[]> =>
  (await rows<{ data: { subject: string; text: string } }>(`SELECT data FROM pgboss.job WHERE name = 'send-mail' AND data->>'to' = $1 ORDER BY created_on DESC, id DESC`, [email])).map(({ data }) => data);

/** The secret in the link of the newest letter about something. */
async function tokenIn(email: string, subject: string): Promise<string> {
  const letter = (await lettersTo(email)).find((one) => one.subject === subject);
  const token = /\/(?:confirm-email|reset-password)\/([A-Za-z0-9_-]{43})/.exec(letter?.text ?? '')?.[1];
  if (!token) throw new Error(`no link in a letter "${subject}" to ${email}`);
  return token;
}

async function newcomer(): Promise<{ viewer: Viewer; email: string }> {
  const email = `newcomer${(count += 1)}@cast.example`;
  const { accountId } = await signUp({ name: 'Nell', email, password: PASSWORD, as: ['landowner'], zip: '54665', clientAddress: null }, at);
  return { viewer: await viewerFor(accountId), email };
}

/** The viewer of a session opened as the pages open it. */
async function signedIn(accountId: string, agent = 'test'): Promise<{ viewer: Viewer; cookie: string }> {
  const { value } = await openSession(accountId, agent);
  const { viewer } = await viewerOf(value);
  if (!viewer) throw new Error('the session does not open');
  return { viewer, cookie: value };
}

beforeEach(async () => void (await execute('DELETE FROM rate_limit')));
const signingIn = (email: string, password: string, clientAddress = '192.0.2.1') => signIn({ email, password, clientAddress }, at);

describe('signing up', () => {
  it('keeps only an argon2id hash at the stated cost, records the terms, and sends a link', async () => {
    const { viewer, email } = await newcomer();
    const account = await Account.findByPk(viewer.id, { rejectOnEmpty: true });
    // The parameters are the first of the OWASP Password Storage Cheat Sheet for Argon2id: m=19456, t=2, p=1.
    expect(account.passwordHash).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
    expect(account.emailConfirmedAt).toBeNull();
    expect(await TermsAcceptance.count({ where: { accountId: viewer.id, version: termsVersion } })).toBe(1);
    expect((await lettersTo(email)).map(({ subject }) => subject)).toEqual(['Confirm your e-mail address']);
    expect(await Event.count({ where: { actorId: viewer.id, action: 'signUp' } })).toBe(1);
  });

  it('refuses an address in use, in any case of letters, and lets one of eight at once in', async () => {
    const { email } = await newcomer();
    await expect(signUp({ name: 'X', email: email.toUpperCase(), password: PASSWORD, as: ['sawyer'], zip: null, clientAddress: null }, at)).rejects.toMatchObject({ kind: 'invalid', problems: [{ path: 'email' }] });
    const tries = await Promise.allSettled(Array.from({ length: 8 }, () => signUp({ name: 'X', email: 'race@cast.example', password: PASSWORD, as: ['sawyer'], zip: null, clientAddress: null }, at)));
    expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    for (const one of tries) if (one.status === 'rejected') expect(one.reason).toMatchObject({ kind: 'invalid' });
  });

  it('says at each field what is wrong with a form', () => {
    const read = signUpForm.safeParse({ name: ' ', email: 'nobody', password: 'short', zip: '5466' });
    expect(new Set(read.error?.issues.map((issue) => issue.path.join('.')))).toEqual(new Set(['name', 'email', 'password', 'as', 'zip', 'terms']));
    expect(signUpForm.safeParse({ name: 'Nell', email: ' nell@example.org ', password: ' spaces are kept ', as: 'sawyer', terms: 'on' }).data).toMatchObject({ email: 'nell@example.org', password: ' spaces are kept ', as: ['sawyer'], zip: null });
    for (const password of ['aaaaaaaaaaaa', '1234567890', 'password123', 'qwertyuiop']) expect(signUpForm.shape.password.safeParse(password).success).toBe(false);
    expect(closeAccountForm.safeParse({ password: 'x' }).success).toBe(false);
  });

  it('counts tries by network address', async () => {
    for (let n = 0; n < 20; n += 1) await signUp({ name: 'X', email: `many${n}@cast.example`, password: PASSWORD, as: ['sawyer'], zip: null, clientAddress: '192.0.2.9' }, at);
    await expect(signUp({ name: 'X', email: 'many20@cast.example', password: PASSWORD, as: ['sawyer'], zip: null, clientAddress: '192.0.2.9' }, at)).rejects.toMatchObject({ kind: 'tooMany' });
  });
});

describe('links in letters', () => {
  it('confirm an address once, keep only the hash, and run out', async () => {
    const { viewer, email } = await newcomer();
    const token = await tokenIn(email, 'Confirm your e-mail address');
    expect(await EmailToken.count({ where: { hash: token } })).toBe(0);
    expect(await EmailToken.count({ where: { hash: createHash('sha256').update(token).digest('hex') } })).toBe(1);
    await expect(confirmEmail(token, later(73 * 60))).rejects.toMatchObject({ kind: 'notFound' });
    const tries = await Promise.allSettled(Array.from({ length: 8 }, () => confirmEmail(token, at)));
    expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    expect((await viewerFor(viewer.id)).emailConfirmed).toBe(true);
    await expect(sendConfirmation(await viewerFor(viewer.id), at)).rejects.toMatchObject({ kind: 'conflict' });
  });

  it('stop working when a newer one is asked for', async () => {
    const { viewer, email } = await newcomer();
    const first = await tokenIn(email, 'Confirm your e-mail address');
    await sendConfirmation(viewer, at);
    await expect(confirmEmail(first, at)).rejects.toMatchObject({ kind: 'notFound' });
  });
});

describe('signing in', () => {
  it('answers the same to an unknown address and a wrong password, after about the same time', async () => {
    const { email } = await newcomer();
    const timed = async (work: () => Promise<unknown>): Promise<{ ms: number; message: string }> => {
      const started = performance.now();
      const refusal = await work().then(() => null, (error: unknown) => error as Error);
      return { ms: performance.now() - started, message: refusal?.message ?? 'let in' };
    };
    await timed(() => signingIn('warm@cast.example', 'warm up'));
    const known: number[] = [];
    const unknown: number[] = [];
    for (let n = 0; n < 7; n += 1) {
      const wrong = await timed(() => signingIn(email, 'not the password'));
      const nobody = await timed(() => signingIn(`nobody${n}@cast.example`, 'not the password'));
      expect(wrong.message).toBe(nobody.message);
      known.push(wrong.ms);
      unknown.push(nobody.ms);
    }
    const median = (list: number[]): number => [...list].sort((a, b) => a - b)[Math.floor(list.length / 2)] ?? 0;
    // Without the decoy an unknown address would answer in about a tenth of the time.
    expect(median(unknown)).toBeGreaterThan(median(known) * 0.5);
    expect((await signingIn(email, PASSWORD)).secondFactor).toBe(false);
  });

  it('counts wrong tries by account and address and forgets them after a success', async () => {
    const { email } = await newcomer();
    for (let n = 0; n < 9; n += 1) await expect(signingIn(email, 'wrong')).rejects.toMatchObject({ kind: 'invalid' });
    await signingIn(email, PASSWORD);
    for (let n = 0; n < 10; n += 1) await expect(signingIn(email, 'wrong')).rejects.toMatchObject({ kind: 'invalid' });
    await expect(signingIn(email, PASSWORD)).rejects.toMatchObject({ kind: 'tooMany' });
    // A stranger who tries and tries does not keep the account's holder out, who comes from elsewhere.
    await signingIn(email, PASSWORD, '192.0.3.99');
  });

  it('counts wrong tries for one account from everywhere', async () => {
    const { email } = await newcomer();
    await countMore('sign-in by account', email, 99);
    await expect(signingIn(email, 'wrong', '192.0.2.7')).rejects.toMatchObject({ kind: 'invalid' });
    await expect(signingIn(email, PASSWORD, '192.0.2.8')).rejects.toMatchObject({ kind: 'tooMany' });
  });

  it('goes on to our own pages only', () => {
    expect(ownPath('/listings/1001/bids?sort=low#two')).toBe('/listings/1001/bids?sort=low#two');
    for (const elsewhere of ['//elsewhere.example', '/\\elsewhere.example', 'https://elsewhere.example/', 'javascript:alert(1)', '/\t/elsewhere.example', '/a b', '', null, undefined, `/${'a'.repeat(3000)}`]) expect(ownPath(elsewhere)).toBeNull();
  });
});

describe('sessions', () => {
  it('are listed without their secret, ended one by one or all others at once, and never those of someone else', async () => {
    const { viewer: nell } = await newcomer();
    const { viewer: other } = await newcomer();
    const here = await signedIn(nell.id, 'Mozilla/5.0 (X11; Linux x86_64) Firefox/140.0');
    const phone = await signedIn(nell.id, 'Mozilla/5.0 (iPhone; CPU iPhone OS 18_0 like Mac OS X) Version/18.0 Mobile/15E148 Safari/604.1');
    await signedIn(nell.id);
    const theirs = await signedIn(other.id);
    const listed = await sessionsOf(here.viewer, new Date());
    expect(listed.map(({ device }) => device)).toEqual(expect.arrayContaining(['Firefox on Linux', 'Safari on an iPhone', 'Unknown device']));
    expect(listed[0]?.mine).toBe(true);
    expect(JSON.stringify(listed)).not.toContain(here.cookie);
    await expect(endOneSession(here.viewer, theirs.viewer.sessionId, at)).rejects.toMatchObject({ kind: 'notFound' });
    await endOneSession(here.viewer, phone.viewer.sessionId, at);
    expect((await viewerOf(phone.cookie)).viewer).toBeNull();
    expect(await endOtherSessions(here.viewer, at)).toBe(1);
    expect((await viewerOf(here.cookie)).viewer?.id).toBe(nell.id);
    expect((await viewerOf(theirs.cookie)).viewer?.id).toBe(other.id);
  });

  it('are kept as a hash', async () => {
    const { viewer } = await newcomer();
    const { cookie } = await signedIn(viewer.id);
    expect(await Session.count({ where: { idHash: cookie } })).toBe(0);
  });
});

describe('password and address', () => {
  it('are reset by a link that ends every session and works once', async () => {
    const { viewer, email } = await newcomer();
    const { cookie } = await signedIn(viewer.id);
    await askPasswordReset({ email, clientAddress: '192.0.2.1' }, at);
    const token = await tokenIn(email, 'Choose a new password');
    await expect(resetPassword({ token, newPassword: 'another good one' }, later(61))).rejects.toMatchObject({ kind: 'notFound' });
    await resetPassword({ token, newPassword: 'another good one' }, later(30));
    expect((await viewerOf(cookie)).viewer).toBeNull();
    await expect(resetPassword({ token, newPassword: 'and a third one' }, later(31))).rejects.toMatchObject({ kind: 'notFound' });
    await expect(signingIn(email, PASSWORD)).rejects.toMatchObject({ kind: 'invalid' });
    await signingIn(email, 'another good one');
    expect((await lettersTo(email))[0]?.subject).toBe('Your password was changed');
  });

  it('say nothing about an address that has no account', async () => {
    await askPasswordReset({ email: 'nobody@cast.example', clientAddress: '192.0.2.1' }, at);
    expect(await lettersTo('nobody@cast.example')).toEqual([]);
  });

  it('change by the present password, ending the other sessions', async () => {
    const { viewer } = await newcomer();
    const here = await signedIn(viewer.id);
    const there = await signedIn(viewer.id);
    await expect(changePassword(here.viewer, { currentPassword: 'wrong', newPassword: 'another good one' }, at)).rejects.toMatchObject({ problems: [{ path: 'currentPassword' }] });
    await changePassword(here.viewer, { currentPassword: PASSWORD, newPassword: 'another good one' }, at);
    expect((await viewerOf(there.cookie)).viewer).toBeNull();
    expect((await viewerOf(here.cookie)).viewer?.id).toBe(viewer.id);
  });

  it('move to a new address only when its link is followed, and tell the old one', async () => {
    const { viewer, email } = await newcomer();
    await changeEmail(viewer, { newEmail: 'nell.new@cast.example', emailPassword: PASSWORD }, at);
    expect((await viewerFor(viewer.id)).email).toBe(email);
    expect((await lettersTo(email))[0]?.subject).toBe('A new e-mail address was asked for');
    expect(await confirmEmail(await tokenIn('nell.new@cast.example', 'Confirm your new e-mail address'), at)).toMatchObject({ changed: true });
    expect(await viewerFor(viewer.id)).toMatchObject({ email: 'nell.new@cast.example', emailConfirmed: true });
    expect((await lettersTo(email))[0]?.subject).toBe('Your e-mail address was changed');
  });

  it.each([
    ['changed', async (viewer: Viewer) => changePassword(viewer, { currentPassword: PASSWORD, newPassword: 'another good one' }, at)],
    ['reset', async (viewer: Viewer) => {
      await askPasswordReset({ email: viewer.email, clientAddress: '192.0.2.1' }, at);
      await resetPassword({ token: await tokenIn(viewer.email, 'Choose a new password'), newPassword: 'another good one' }, at);
    }],
  ])('end the links of earlier letters when the password is %s: who asked for another address before does not get the account', async (how, renew) => {
    const { viewer, email } = await newcomer();
    const elsewhere = `thief-${how}@cast.example`;
    await changeEmail(viewer, { newEmail: elsewhere, emailPassword: PASSWORD }, at);
    const link = await tokenIn(elsewhere, 'Confirm your new e-mail address');
    await renew(viewer);
    await expect(confirmEmail(link, at)).rejects.toMatchObject({ kind: 'notFound' });
    expect((await viewerFor(viewer.id)).email).toBe(email);
  });

  it('send no link to an address of another account, and do not say so', async () => {
    const { viewer } = await newcomer();
    const { email } = await newcomer();
    const before = (await lettersTo(email)).length;
    await changeEmail(viewer, { newEmail: email, emailPassword: PASSWORD }, at);
    expect((await lettersTo(email)).length).toBe(before);
  });
});

describe('the second factor', () => {
  it('turns on by a code, asks for it at sign-in, takes each code once, and turns off by password and code', async () => {
    const { viewer, email } = await newcomer();
    const here = await signedIn(viewer.id);
    const there = await signedIn(viewer.id);
    const secret = newSecondFactor();
    const code = (when: Date): string => generateSync({ secret, epoch: when.getTime() / 1000 });
    const sealed = sealSecret(viewer.id, secret);
    await expect(turnOnSecondFactor(here.viewer, { sealed: sealSecret('someone else', secret), code: code(at) }, at)).rejects.toMatchObject({ kind: 'conflict' });
    await expect(turnOnSecondFactor(here.viewer, { sealed, code: code(later(10)) }, at)).rejects.toMatchObject({ kind: 'invalid' });
    await turnOnSecondFactor(here.viewer, { sealed, code: code(at) }, at);
    expect((await viewerOf(there.cookie)).viewer).toBeNull();
    expect((await Account.findByPk(viewer.id))?.totpSecret).not.toContain(secret);

    expect((await signingIn(email, PASSWORD)).secondFactor).toBe(true);
    await expect(giveSecondFactor(viewer.id, code(at), at)).rejects.toMatchObject({ kind: 'invalid' });
    const tries = await Promise.allSettled(Array.from({ length: 4 }, () => giveSecondFactor(viewer.id, code(later(1)), later(1))));
    expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);

    await expect(turnOffSecondFactor(here.viewer, { offPassword: PASSWORD, offCode: code(later(1)) }, later(1))).rejects.toMatchObject({ problems: [{ path: 'offCode' }] });
    await turnOffSecondFactor(here.viewer, { offPassword: PASSWORD, offCode: code(later(2)) }, later(2));
    expect((await signingIn(email, PASSWORD)).secondFactor).toBe(false);
  });

  it('reads the codes of RFC 6238, appendix B (SHA-1; last six of its eight digits), and refuses used steps', () => {
    const secret = 'GEZDGNBVGY3TQOJQGEZDGNBVGY3TQOJQ';
    for (const [seconds, code] of [[59, '287082'], [1111111109, '081804'], [1111111111, '050471'], [1234567890, '005924'], [2000000000, '279037']] as const) {
      expect(codeStep(secret, code, new Date(seconds * 1000), null)).toBe(Math.floor(seconds / 30));
      expect(codeStep(secret, code, new Date(seconds * 1000), Math.floor(seconds / 30))).toBeNull();
      expect(codeStep(secret, code, new Date((seconds + 90) * 1000), null)).toBeNull();
    }
    expect(codeStep(secret, 'abcdef', at, null)).toBeNull();
  });

  it('waits ten minutes between password and code, and not past a change of password', async () => {
    const { viewer } = await newcomer();
    const pending = await pendingFor(viewer.id, at);
    expect(await pendingAccount(pending, later(9))).toBe(viewer.id);
    expect(await pendingAccount(pending, later(10))).toBeNull();
    expect(await pendingAccount(`${pending.slice(0, -2)}AA`, at)).toBeNull();
    await changePassword((await signedIn(viewer.id)).viewer, { currentPassword: PASSWORD, newPassword: 'another good one' }, at);
    expect(await pendingAccount(pending, later(1))).toBeNull();
  });

  it('seals for one purpose and one owner', () => {
    const sealed = seal('one', 'ada', 'text');
    expect(unseal('one', 'ada', sealed)).toBe('text');
    expect(unseal('two', 'ada', sealed)).toBeNull();
    expect(unseal('one', 'bram', sealed)).toBeNull();
    expect(unseal('one', 'ada', 'short')).toBeNull();
  });
});

describe('one’s own account', () => {
  it('changes name and roles, but is never nothing at all', async () => {
    const { viewer } = await newcomer();
    await changeAccount(viewer, { name: 'Nell B', as: ['landowner', 'sawyer'], zip: null }, at);
    expect(await viewerFor(viewer.id)).toMatchObject({ name: 'Nell B', isLandowner: true, isSawyer: true });
    await expect(changeAccount(viewer, { name: 'Nell', as: [], zip: null }, at)).rejects.toMatchObject({ problems: [{ path: 'as' }] });
    await expect(changeAccount({ ...viewer, active: false }, { name: 'Nell', as: ['sawyer'], zip: null }, at)).rejects.toMatchObject({ kind: 'forbidden' });
  });

  it('accepts the terms once a version', async () => {
    const { viewer } = await newcomer();
    await acceptTerms(viewer, at);
    await acceptTerms(viewer, at);
    expect(await TermsAcceptance.count({ where: { accountId: viewer.id } })).toBe(1);
  });

  it('blocks and unblocks, both ways round', async () => {
    const { viewer: one } = await newcomer();
    const { viewer: two } = await newcomer();
    await blockAccount(one, two.id, at);
    await blockAccount(one, two.id, at);
    expect(await blockedBetween(one.id, two.id)).toBe(true);
    expect(await blockedBetween(two.id, one.id)).toBe(true);
    await expect(blockAccount(one, one.id, at)).rejects.toMatchObject({ kind: 'conflict' });
    await unblockAccount(one, two.id, at);
    expect(await blockedBetween(two.id, one.id)).toBe(false);
  });

  it('is exported whole, without a secret', async () => {
    const { viewer, email } = await newcomer();
    await signedIn(viewer.id);
    const text = JSON.stringify(await accountExport(viewer, at));
    expect(text).toContain(email);
    expect(text).not.toMatch(/argon2|passwordHash|password_hash|id_hash|totp_secret/);
    expect(JSON.parse(text)).toMatchObject({ account: [{ email, zip: '54665' }], sessions: [{ user_agent: 'test' }], termsAccepted: [{ version: termsVersion }] });
  });

  it('closes: personal data leaves, the audit log stays, the address is free again', async () => {
    const { viewer, email } = await newcomer();
    const { cookie } = await signedIn(viewer.id);
    await expect(closeAccount(viewer, { password: 'wrong' }, at)).rejects.toMatchObject({ problems: [{ path: 'password' }] });
    await closeAccount(viewer, { password: PASSWORD }, at);
    expect((await viewerOf(cookie)).viewer).toBeNull();
    await expect(signingIn(email, PASSWORD)).rejects.toMatchObject({ kind: 'invalid' });
    const left = await oneRow<{ text: string }>('SELECT to_jsonb(account)::text AS text FROM account WHERE id = $1', [viewer.id]);
    expect(left?.text).not.toContain(email);
    expect(left?.text).not.toContain('Nell');
    expect(await Event.count({ where: { actorId: viewer.id, action: 'close' } })).toBe(1);
    await signUp({ name: 'Nell again', email, password: PASSWORD, as: ['landowner'], zip: null, clientAddress: null }, at);
  });
});

describe('passwords', () => {
  it('are the same however a keyboard composes them, and never match an empty hash', async () => {
    const { hashPassword } = await import('~/server/passwords.ts');
    const kept = await hashPassword('na\u00efve plank caf\u00e9');
    expect(await passwordMatches(kept, 'nai\u0308ve plank cafe\u0301')).toBe(true);
    expect(await passwordMatches('', '')).toBe(false);
    expect(await passwordMatches(null, 'a decoy that nobody types')).toBe(false);
  });
});
