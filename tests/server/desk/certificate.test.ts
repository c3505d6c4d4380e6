import { randomUUID } from 'node:crypto';
import { beforeAll, describe, expect, it } from 'vitest';
import { certificateKey } from '~/domain/certificate.ts';
import { handInCertificate } from '~/server/commands/hand-in-certificate.ts';
import { noteCertificate, refuseCertificate } from '~/server/commands/note-certificate.ts';
import { seeCertificate } from '~/server/commands/see-certificate.ts';
import { rows } from '~/server/db.ts';
import { Event, SawyerProfile } from '~/server/models/index.ts';
import { deskHome } from '~/server/queries/desk/home.ts';
import { sawyerPage } from '~/server/queries/sawyer-page.ts';
import { writeObject } from '~/server/services/storage.ts';
import { makeCast, type Cast } from '../../support/cast.ts';
import { setUpSawyer } from '../../support/sawing-market.ts';
import { startStorage } from '../../support/storage.ts';

let cast: Cast;
const at = new Date('2026-07-20T15:00:00Z');
const pdf = Buffer.from('%PDF-1.7\nA certificate of liability insurance.');

const stored = async (accountId: string, bytes: Buffer = pdf): Promise<string> => {
  const file = randomUUID();
  await writeObject(certificateKey(accountId, file), bytes, 'application/octet-stream');
  return file;
};
const sentAt = async (): Promise<string> => (await SawyerProfile.findByPk(cast.bram.id, { rejectOnEmpty: true })).certificateSentAt?.toISOString() ?? '';

beforeAll(async () => {
  await startStorage();
  cast = await makeCast();
  await setUpSawyer(cast.bram.id);
});

describe('a certificate of insurance', () => {
  it('is taken only as a PDF or picture that is in the sawyer’s own place, with a day ahead', async () => {
    const file = await stored(cast.bram.id);
    await expect(handInCertificate(cast.ada, { file, saysUntil: '2027-01-31' }, at)).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(handInCertificate(cast.cleo, { file, saysUntil: '2027-01-31' }, at)).rejects.toMatchObject({ problems: [{ path: 'file' }] });
    await expect(handInCertificate(cast.bram, { file: randomUUID(), saysUntil: '2027-01-31' }, at)).rejects.toMatchObject({ problems: [{ path: 'file' }] });
    await expect(handInCertificate(cast.bram, { file: await stored(cast.bram.id, Buffer.from('<html>')), saysUntil: '2027-01-31' }, at)).rejects.toMatchObject({ problems: [{ path: 'file' }] });
    await expect(handInCertificate(cast.bram, { file, saysUntil: '2026-07-20' }, at)).rejects.toMatchObject({ problems: [{ path: 'saysUntil' }] });
    await handInCertificate(cast.bram, { file, saysUntil: '2027-01-31' }, at);
    expect((await deskHome(cast.mo)).certificates).toMatchObject([{ accountId: cast.bram.id, saysUntil: '2027-01-31' }]);
  });

  it('is opened by moderators only, each time on the record, and never by what it says it is', async () => {
    await expect(seeCertificate(cast.bram, cast.bram.id, at)).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(seeCertificate(cast.mo, cast.cleo.id, at)).rejects.toMatchObject({ kind: 'notFound' });
    expect(await seeCertificate(cast.mo, cast.bram.id, at)).toMatchObject({ type: 'application/pdf', bytes: pdf });
    expect(await Event.count({ where: { action: 'seeCertificate', thingId: cast.bram.id, actorId: cast.mo.id } })).toBe(1);
  });

  it('is noted once of eight at once, and landowners read it until it expires', async () => {
    const looked = await sentAt();
    await expect(noteCertificate(cast.bram, { account: cast.bram.id, expiresOn: '2027-01-31', sentAt: looked }, at)).rejects.toMatchObject({ kind: 'forbidden' });
    await expect(noteCertificate(cast.mo, { account: cast.bram.id, expiresOn: '2026-07-01', sentAt: looked }, at)).rejects.toMatchObject({ problems: [{ path: 'expiresOn' }] });
    const tries = await Promise.allSettled(Array.from({ length: 8 }, () => noteCertificate(cast.mo, { account: cast.bram.id, expiresOn: '2027-01-31', sentAt: looked }, at)));
    expect(tries.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    expect((await sawyerPage(cast.bram.id, null, at)).certificateExpiresOn).toBe('2027-01-31');
    expect((await sawyerPage(cast.bram.id, null, new Date('2027-02-01T12:00:00Z'))).certificateExpiresOn).toBeNull();
    expect((await deskHome(cast.mo)).certificates).toEqual([]);
  });

  it('that replaced the one a moderator looked at is not taken for it; refused, the seen one stays', async () => {
    await handInCertificate(cast.bram, { file: await stored(cast.bram.id), saysUntil: '2028-01-31' }, at);
    const looked = await sentAt();
    await handInCertificate(cast.bram, { file: await stored(cast.bram.id), saysUntil: '2028-02-28' }, new Date(at.getTime() + 1000));
    await expect(noteCertificate(cast.mo, { account: cast.bram.id, expiresOn: '2028-01-31', sentAt: looked }, at)).rejects.toMatchObject({ kind: 'conflict' });
    await refuseCertificate(cast.mo, { account: cast.bram.id, reason: 'It names another business.', sentAt: await sentAt() }, at);
    expect((await sawyerPage(cast.bram.id, null, at)).certificateExpiresOn).toBe('2027-01-31');
    const letters = await rows<{ subject: string }>(`SELECT data->>'subject' AS subject FROM pgboss.job WHERE name = 'send-mail' AND data->>'to' = $1`, [cast.bram.email]);
    expect(letters.map(({ subject }) => subject)).toContain('Your certificate of insurance cannot be taken');
  });
});
