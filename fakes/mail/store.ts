import { randomBytes } from 'node:crypto';
import { mkdirSync, readFileSync, readdirSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { simpleParser, type ParsedMail } from 'mailparser';

export interface Attachment {
  name: string;
  contentType: string;
  size: number;
}

/** What the lists show of a message. `to` is whom the envelope names, so blind copies are found too. */
export interface Summary {
  id: string;
  receivedAt: string;
  from: string;
  to: string[];
  subject: string;
  attachments: Attachment[];
}

export interface Message extends Summary {
  text: string;
  html: string | null;
  /** Every address a link in the message leads to, in order, each once. */
  links: string[];
  headers: Record<string, string>;
}

interface Envelope {
  from: string;
  to: string[];
}

function linksIn(text: string, html: string | null): string[] {
  const inHtml = [...(html ?? '').matchAll(/href="(https?:[^"]+)"/g)].map((match) => (match[1] ?? '').replaceAll('&amp;', '&'));
  const inText = [...text.matchAll(/https?:\/\/[^\s<>"]+[^\s<>".,;:!?)\]]/g)].map((match) => match[0]);
  return [...new Set([...inText, ...inHtml])];
}

function attachmentsOf(parsed: ParsedMail): Attachment[] {
  return parsed.attachments.map((one, index) => ({
    name: one.filename ?? (one.contentType === 'text/calendar' ? 'invitation.ics' : `attachment-${index + 1}`),
    contentType: one.contentType,
    size: one.size,
  }));
}

/** Keeps every message as it came (`.eml`) with a summary beside it (`.json`), newest first in memory. */
export class MailStore {
  private readonly dir: string;
  private summaries: Summary[] = [];
  private last = 0;

  constructor(dir: string) {
    this.dir = dir;
    mkdirSync(dir, { recursive: true });
    this.summaries = readdirSync(dir)
      .filter((name) => name.endsWith('.json'))
      .sort()
      .reverse()
      .map((name) => JSON.parse(readFileSync(join(dir, name), 'utf8')) as Summary);
  }

  /** Writes the message to disk before it is acknowledged. */
  async keep(source: Buffer, envelope: Envelope): Promise<Summary> {
    const parsed = await simpleParser(source);
    // Ids sort as they arrived, also within one millisecond.
    this.last = Math.max(this.last + 1, Date.now() * 1000);
    const id = `${String(this.last).padStart(18, '0')}-${randomBytes(4).toString('hex')}`;
    const summary: Summary = {
      id,
      receivedAt: new Date(this.last / 1000).toISOString(),
      from: parsed.from?.text ?? envelope.from,
      to: envelope.to,
      subject: parsed.subject ?? '',
      attachments: attachmentsOf(parsed),
    };
    writeFileSync(this.path(id, 'eml'), source);
    writeFileSync(this.path(id, 'draft'), JSON.stringify(summary));
    renameSync(this.path(id, 'draft'), this.path(id, 'json'));
    this.summaries.unshift(summary);
    return summary;
  }

  /** Newest first. `to` is one whole address, compared without regard to case. */
  list(to: string | null): readonly Summary[] {
    if (to === null) return this.summaries;
    const wanted = to.trim().toLowerCase();
    return this.summaries.filter((one) => one.to.some((address) => address.toLowerCase() === wanted));
  }

  source(id: string): Buffer | null {
    return this.summaries.some((one) => one.id === id) ? readFileSync(this.path(id, 'eml')) : null;
  }

  async message(id: string): Promise<Message | null> {
    const summary = this.summaries.find((one) => one.id === id);
    const source = this.source(id);
    if (!summary || !source) return null;
    const parsed = await simpleParser(source);
    const text = parsed.text ?? '';
    const html = typeof parsed.html === 'string' ? parsed.html : null;
    const headers = Object.fromEntries(parsed.headerLines.map(({ key, line }) => [key, line.slice(line.indexOf(':') + 1).trim()]));
    return { ...summary, text, html, links: linksIn(text, html), headers };
  }

  async attachment(id: string, index: number): Promise<(Attachment & { content: Buffer }) | null> {
    const source = this.source(id);
    if (!source) return null;
    const parsed = await simpleParser(source);
    const about = attachmentsOf(parsed)[index];
    const found = parsed.attachments[index];
    return about && found ? { ...about, content: found.content } : null;
  }

  clear(): void {
    for (const { id } of this.summaries) for (const kind of ['eml', 'json'] as const) rmSync(this.path(id, kind), { force: true });
    this.summaries = [];
  }

  private path(id: string, kind: 'eml' | 'json' | 'draft'): string {
    return join(this.dir, `${id}.${kind}`);
  }
}
