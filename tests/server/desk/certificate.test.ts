import { randomUUID } from 'node:crypto';
import { beforeAll, describe, expect, it } from 'vitest';
import { certificateKey, remindersDue, type CertificateKind } from '~/domain/certificate.ts';
import { certificateUpload } from '~/server/certificate-upload.ts';
import { handInCertificate } from '~/server/commands/hand-in-certificate.ts';
import { removeCertificateFiles, remindOfCertificates } from '~/server/commands/keep-certificates.ts';
import { noteCertificate, refuseCertificate } from '~/server/commands/note-certificate.ts';
import { seeCertificate } from '~/server/commands/see-certificate.ts';
import { rows } from '~/server/db.ts';
import { Event } from '~/server/models/index.ts';
import { Certificate } from '~/server/models/sawyer.ts';
import { deskHome } from '~/server/queries/desk/home.ts';
import { sawyerPage } from '~/server/queries/sawyer-page.ts';
import { MissingObject, readObject, writeObject } from '~/server/services/storage.ts';
import { makeCast, type Cast } from '../../support/cast.ts';
import { setUpSawyer } from '../../support/sawing-market.ts';
import { startStorage } from '../../support/storage.ts';

let cast: Cast;
const at = new Date('2026-07-20T15:00:00Z');
const pdf = Buffer.from('%PDF-1.7\nA certificate of liability insurance.');

const stored = async (accountId: string, bytes: Buffer = pdf, kind: CertificateKind = 'insurance'): Promise<string> => {
  const { fields } = await certificateUpload(accountId, kind, at);
  const file = fields['key']?.split('/')[2] ?? '';
  await writeObject(certificateKey(accountId, file), bytes, 'application/octet-stream');
  return file;
};
const sentAt = async (kind: CertificateKind = 'insurance'): Promise<string> => (await Certificate.findOne({ where: { sawyerId: cast.bram.id, kind }, rejectOnEmpty: true })).sentAt?.toISOString() ?? '';
const inStorage = async (file: string): Promise<boolean> =>
  readObject(certificateKey(cast.bram.id, file), 1_000_000).then(() => true, (error: unknown) => {
    if (error instanceof MissingObject) return false;
    throw error;
  });
const days = (count: number, from = at): Date => new Date(from.getTime() + count * 86_400_000);
const letters = async (): Promise<readonly string[]> => (await rows<{ subject: string }>(`SELECT data->>'subject' AS subject FROM pgboss.job WHERE name = 'send-mail' AND data->>'to' = $1 ORDER BY created_on`, [cast.bram.email])).map(({ subject }) => subject);

beforeAll(async () => {
  await startStorage();
  cast = await makeCast();
  await setUpSawyer(cast.bram.id);
});

describe('a certificate of insurance', () => {
  it('is taken only as a PDF or picture that is in the sawyer’s own place, with a day ahead', async () => {
    await expect(handInCertificate(cast.bram, { kind: 'insurance', file: await stored(cast.bram.id, Buffer.from('<html>')), saysUntil: '2027-01-31' }, at)).rejects.toMatchObject({ problems: [{ path: 'file' }] });
    const file = await stored(cast.bram.id);
    await expect(handInCertificate(cast.ada, { kind: 'insurance', file, saysUntil: '2027-01-31' }, at)).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(handInCertificate(cast.cleo, { kind: 'insurance', file, saysUntil: '2027-01-31' }, at)).rejects.toMatchObject({ problems: [{ path: 'file' }] });
    await expect(handInCertificate(cast.bram, { kind: 'insurance', file: randomUUID(), saysUntil: '2027-01-31' }, at)).rejects.toMatchObject({ problems: [{ path: 'file' }] });
    await expect(handInCertificate(cast.bram, { kind: 'insurance', file, saysUntil: '2026-07-20' }, at)).rejects.toMatchObject({ problems: [{ path: 'saysUntil' }] });
    await handInCertificate(cast.bram, { kind: 'insurance', file, saysUntil: '2027-01-31' }, at);
    expect((await deskHome(cast.mo)).certificates).toMatchObject([{ accountId: cast.bram.id, saysUntil: '2027-01-31' }]);
  });

  it('is opened by moderators only, each time on the record, and never by what it says it is', async () => {
    await expect(seeCertificate(cast.bram, cast.bram.id, 'insurance', at)).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(seeCertificate(cast.mo, cast.cleo.id, 'insurance', at)).rejects.toMatchObject({ kind: 'notFound' });
    expect(await seeCertificate(cast.mo, cast.bram.id, 'insurance', at)).toMatchObject({ type: 'application/pdf', bytes: pdf });
    expect(await Event.count({ where: { action: 'seeCertificate', thingId: cast.bram.id, actorId: cast.mo.id } })).toBe(1);
  });

  it('is noted once of eight at once, and landowners read it until it expires', async () => {
    const looked = await sentAt();
    await expect(noteCertificate(cast.bram, { account: cast.bram.id, kind: 'insurance', expiresOn: '2027-01-31', sentAt: looked }, at)).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(noteCertificate(cast.mo, { account: cast.bram.id, kind: 'insurance', expiresOn: '2026-07-01', sentAt: looked }, at)).rejects.toMatchObject({ problems: [{ path: 'expiresOn' }] });
    const tries = await Promise.allSettled(Array.from({ length: 8 }, () => noteCertificate(cast.mo, { account: cast.bram.id, kind: 'insurance', expiresOn: '2027-01-31', sentAt: looked }, at)));
    expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    expect((await sawyerPage(cast.bram.id, null, at)).certificateExpiresOn).toBe('2027-01-31');
    expect((await sawyerPage(cast.bram.id, null, new Date('2027-02-01T12:00:00Z'))).certificateExpiresOn).toBeNull();
    expect((await deskHome(cast.mo)).certificates).toEqual([]);
  });

  it('that replaced the one a moderator looked at is not taken for it; refused, the seen one stays', async () => {
    await handInCertificate(cast.bram, { kind: 'insurance', file: await stored(cast.bram.id), saysUntil: '2028-01-31' }, at);
    const looked = await sentAt();
    await handInCertificate(cast.bram, { kind: 'insurance', file: await stored(cast.bram.id), saysUntil: '2028-02-28' }, new Date(at.getTime() + 1000));
    await expect(noteCertificate(cast.mo, { account: cast.bram.id, kind: 'insurance', expiresOn: '2028-01-31', sentAt: looked }, at)).rejects.toMatchObject({ kind: 'conflict' });
    await refuseCertificate(cast.mo, { account: cast.bram.id, kind: 'insurance', reason: 'It names another business.', sentAt: await sentAt() }, at);
    expect((await sawyerPage(cast.bram.id, null, at)).certificateExpiresOn).toBe('2027-01-31');
    expect(await letters()).toContain('Your certificate of insurance cannot be taken');
    expect(await seeCertificate(cast.mo, cast.bram.id, 'insurance', at)).toMatchObject({ bytes: pdf });
  });
});

describe('the credential for lumber of a dwelling', () => {
  it('is a paper of its own, and read beside what the sawyer states', async () => {
    const file = await stored(cast.bram.id, pdf, 'lumber');
    await expect(handInCertificate(cast.bram, { kind: 'insurance', file, saysUntil: '2027-05-31' }, at)).rejects.toMatchObject({ problems: [{ path: 'file' }] });
    await handInCertificate(cast.bram, { kind: 'lumber', file, saysUntil: '2027-05-31' }, at);
    expect((await deskHome(cast.mo)).certificates).toMatchObject([{ kind: 'lumber', accountId: cast.bram.id }]);
    await noteCertificate(cast.mo, { account: cast.bram.id, kind: 'lumber', expiresOn: '2027-05-31', sentAt: await sentAt('lumber') }, at);
    expect(await sawyerPage(cast.bram.id, null, at)).toMatchObject({ certificateExpiresOn: '2027-01-31', lumberCertificateExpiresOn: '2027-05-31' });
    expect((await sawyerPage(cast.bram.id, null, new Date('2027-06-01T12:00:00Z'))).lumberCertificateExpiresOn).toBeNull();
  });
});

describe('the file of a certificate', () => {
  it('is kept while it waits or is the one seen, and goes when nobody needs it any more', async () => {
    const never = await stored(cast.bram.id);
    await removeCertificateFiles(days(2));
    expect(await inStorage(never)).toBe(false);
    const hand = async (from: Date): Promise<string> => {
      const file = await stored(cast.bram.id);
      await handInCertificate(cast.bram, { kind: 'insurance', file, saysUntil: '2028-01-31' }, from);
      return file;
    };
    const replaced = await hand(at);
    const refused = await hand(at);
    await refuseCertificate(cast.mo, { account: cast.bram.id, kind: 'insurance', reason: 'Torn.', sentAt: await sentAt() }, at);
    const seen = await hand(at);
    await noteCertificate(cast.mo, { account: cast.bram.id, kind: 'insurance', expiresOn: '2028-01-31', sentAt: await sentAt() }, at);
    const next = await hand(at);
    const standing = async (): Promise<readonly boolean[]> => Promise.all([replaced, refused, seen, next].map(inStorage));
    await removeCertificateFiles(new Date(at.getTime() + 3_600_000));
    expect(await standing()).toEqual([true, true, true, true]);
    await removeCertificateFiles(days(1));
    expect(await standing()).toEqual([false, true, true, true]);
    await noteCertificate(cast.mo, { account: cast.bram.id, kind: 'insurance', expiresOn: '2029-01-31', sentAt: await sentAt() }, days(10));
    await removeCertificateFiles(days(31));
    expect(await standing()).toEqual([false, false, true, true]);
    await removeCertificateFiles(days(41));
    expect(await standing()).toEqual([false, false, false, true]);
    await removeCertificateFiles(new Date('2029-03-02T00:00:00Z'));
    expect(await standing()).toEqual([false, false, false, false]);
    expect((await sawyerPage(cast.bram.id, null, at)).certificateExpiresOn).toBe('2029-01-31');
    await expect(seeCertificate(cast.mo, cast.bram.id, 'insurance', at)).rejects.toMatchObject({ kind: 'notFound' });
  });

  it('is awaited once, however often the page is looked at', async () => {
    const keys = await Promise.all(Array.from({ length: 4 }, async () => (await certificateUpload(cast.bram.id, 'insurance', at)).fields['key']));
    expect(new Set(keys).size).toBe(1);
  });
});

describe('a certificate that runs out', () => {
  it.each([['2026-08-20', 0], ['2026-08-19', 1], ['2026-07-28', 1], ['2026-07-27', 2], ['2026-07-20', 2], ['2026-07-19', 3]])('on %s is worth %i letters by 20 July 2026', (expiresOn, letters) => {
    expect(remindersDue(expiresOn, '2026-07-20')).toBe(letters);
  });

  it('is told of a month and a week ahead and once it has, each once, unless the next one waits', async () => {
    const told = async (on: string): Promise<number> => {
      const before = (await letters()).length;
      await Promise.all([remindOfCertificates(new Date(`${on}T15:00:00Z`)), remindOfCertificates(new Date(`${on}T15:00:00Z`))]);
      return (await letters()).length - before;
    };
    // The one for lumber, until 31 May 2027, is told of by itself.
    await Certificate.update({ reminders: 9 }, { where: { kind: 'lumber' } });
    expect([await told('2028-12-31'), await told('2029-01-01'), await told('2029-01-02'), await told('2029-01-24'), await told('2029-01-31'), await told('2029-02-01'), await told('2029-02-02')]).toEqual([0, 1, 0, 1, 0, 1, 0]);
    expect((await letters()).at(-1)).toBe('Your certificate of insurance has run out');
    await Certificate.update({ reminders: 0 }, { where: { kind: 'insurance' } });
    await handInCertificate(cast.bram, { kind: 'insurance', file: await stored(cast.bram.id), saysUntil: '2030-01-31' }, new Date('2029-02-03T12:00:00Z'));
    expect(await told('2029-02-03')).toBe(0);
  });
});
