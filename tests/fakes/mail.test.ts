import { mkdtemp, rm } from 'node:fs/promises';
import { request } from 'node:http';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createTransport, type SendMailOptions } from 'nodemailer';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { startFakeMail, type FakeMail } from '../../fakes/mail/server.ts';
import type { Message, Summary } from '../../fakes/mail/store.ts';

let mail: FakeMail;
let dataDir: string;
beforeEach(async () => {
  dataDir = await mkdtemp(join(tmpdir(), 'mail-'));
  mail = await startFakeMail({ dataDir });
});
afterEach(async () => {
  await mail.close();
  await rm(dataDir, { recursive: true, force: true });
});

const CONFIRM = 'http://localhost:4321/confirm?token=a&b=1';
const letter: SendMailOptions = {
  from: 'Skidway <no-reply@skidway.example>',
  to: 'ada@owner.example',
  bcc: 'archive@skidway.example',
  subject: 'Confirm your address · Ääkköset',
  text: `Follow ${CONFIRM}.\nThanks`,
  html: `<p style="color:green">Follow <a href="${CONFIRM.replace('&', '&amp;')}">this link</a></p><script>alert(1)</script>`,
};

async function send(options: SendMailOptions, auth?: { user: string; pass: string }): Promise<void> {
  const transport = createTransport({ host: '127.0.0.1', port: mail.smtpPort, ...(auth ? { auth } : {}) });
  await transport.sendMail(options);
  transport.close();
}

async function list(query = ''): Promise<Summary[]> {
  return ((await (await fetch(`${mail.webUrl}/messages${query}`)).json()) as { messages: Summary[] }).messages;
}

async function first(query = ''): Promise<Summary> {
  const [summary] = await list(query);
  if (!summary) throw new Error('No message came.');
  return summary;
}

test('a message is found by its recipient, blind copies and capitals included', async () => {
  await send(letter);
  await send({ ...letter, to: 'ben@sawyer.example', subject: 'Second' }, { user: 'any', pass: 'thing' });
  expect((await list()).map((one) => one.subject)).toEqual(['Second', 'Confirm your address · Ääkköset']);
  expect((await list('?to=ADA@owner.example')).map((one) => one.to)).toEqual([['ada@owner.example', 'archive@skidway.example']]);
  expect(await list('?to=archive@skidway.example')).toHaveLength(2);
  expect(await list('?to=ada@owner')).toEqual([]);
});

test('one message as JSON has its text, links and headers', async () => {
  await send(letter);
  const { id } = await first();
  const message = (await (await fetch(`${mail.webUrl}/messages/${id}`)).json()) as Message;
  expect(message.text).toContain('Follow');
  expect(message.links).toEqual([CONFIRM]);
  expect(message.headers['to']).toBe('ada@owner.example');
  expect((await fetch(`${mail.webUrl}/messages/none`)).status).toBe(404);
});

test('the page shows it, its links work, and its script does not', async () => {
  await send(letter);
  const { id } = await first();
  const answer = await fetch(`${mail.webUrl}/mail/${id}`);
  const html = await answer.text();
  expect(html).toContain('<h1>Confirm your address · Ääkköset</h1>');
  expect(html).toContain(`<a href="${CONFIRM.replace('&', '&amp;')}">`);
  expect(html).toMatch(/<iframe [^>]*sandbox="(?!.*allow-scripts)(?!.*allow-same-origin)/);
  expect(answer.headers.get('set-cookie')).toBeNull();
  const part = await fetch(`${mail.webUrl}/mail/${id}/html`);
  expect(part.headers.get('content-security-policy')).toMatch(/^default-src 'none';.*sandbox/);
  expect(await (await fetch(mail.webUrl)).text()).toContain(`href="/mail/${id}"`);
});

test('a subject that looks like markup is shown as typed', async () => {
  await send({ ...letter, subject: '<img src=x onerror=alert(1)>' });
  expect(await (await fetch(mail.webUrl)).text()).toContain('&lt;img src=x onerror=alert(1)&gt;');
});

test('an invitation and a file can be fetched', async () => {
  const ics = 'BEGIN:VCALENDAR\r\nVERSION:2.0\r\nEND:VCALENDAR\r\n';
  await send({ ...letter, icalEvent: { method: 'REQUEST', filename: 'milling day.ics', content: ics }, attachments: [{ filename: 'tally.csv', content: 'a,b' }] });
  const { id, attachments } = await first();
  const index = attachments.findIndex((one) => one.name.endsWith('.ics'));
  const file = await fetch(`${mail.webUrl}/messages/${id}/attachments/${index}`);
  expect(await file.text()).toContain('BEGIN:VCALENDAR');
  expect(file.headers.get('content-disposition')).toMatch(/^attachment; filename/);
  const csv = attachments.findIndex((one) => one.name === 'tally.csv');
  expect(await (await fetch(`${mail.webUrl}/messages/${id}/attachments/${csv}`)).text()).toBe('a,b');
  expect((await fetch(`${mail.webUrl}/messages/${id}/attachments/9`)).status).toBe(404);
});

test('mail survives a restart, and is gone once emptied', async () => {
  await send(letter);
  await mail.close();
  mail = await startFakeMail({ dataDir });
  expect(await list()).toHaveLength(1);
  expect((await fetch(`${mail.webUrl}/messages`, { method: 'DELETE' })).status).toBe(204);
  expect(await list()).toEqual([]);
  await mail.close();
  mail = await startFakeMail({ dataDir });
  expect(await list()).toEqual([]);
});

test('an unknown mailbox is refused as a real server would', async () => {
  await expect(send({ ...letter, to: 'nobody@refused.example', bcc: [] })).rejects.toMatchObject({ responseCode: 550 });
  expect(await list()).toEqual([]);
});

test('another name for this machine reads nothing', async () => {
  await send(letter);
  const status = await new Promise<number | undefined>((resolve, reject) => {
    request(`${mail.webUrl}/messages`, { headers: { Host: 'evil.example' } }, (res) => resolve(res.resume().statusCode)).on('error', reject).end();
  });
  expect(status).toBe(421);
});
