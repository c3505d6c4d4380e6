import type { CertificateKind } from '../../src/domain/certificate.ts';
import type { Day } from '../../src/domain/time.ts';
import { certificateUpload } from '../../src/server/certificate-upload.ts';
import { handInCertificate } from '../../src/server/commands/hand-in-certificate.ts';
import { noteCertificate, refuseCertificate } from '../../src/server/commands/note-certificate.ts';
import { openPaper } from '../../src/server/documents/paper.ts';
import { Certificate } from '../../src/server/models/sawyer.ts';
import type { Viewer } from '../../src/server/viewer.ts';
import { who } from './people.ts';
import type { Timeline } from './timeline.ts';

interface Paper {
  readonly sawyer: string;
  readonly kind: CertificateKind;
  /** Days from today on which it was sent, and on which it expires. */
  readonly sent: number;
  readonly expires: number;
  /** What the moderator did the next morning; `waits` is still to be looked at. */
  readonly then: 'seen' | 'waits' | { readonly refused: string };
}

// One each of what may be: good for long, running out (with the letters that follow), run out, refused, waiting.
const papers: readonly Paper[] = [
  { sawyer: 'bram', kind: 'insurance', sent: -88, expires: 214, then: 'seen' },
  { sawyer: 'bram', kind: 'lumber', sent: -70, expires: 660, then: 'seen' },
  { sawyer: 'cleo', kind: 'insurance', sent: -86, expires: 122, then: 'seen' },
  { sawyer: 'jory', kind: 'insurance', sent: -84, expires: 18, then: 'seen' },
  { sawyer: 'lark', kind: 'insurance', sent: -82, expires: 301, then: 'seen' },
  { sawyer: 'moss', kind: 'insurance', sent: -81, expires: 5, then: 'seen' },
  { sawyer: 'moss', kind: 'insurance', sent: -1, expires: 370, then: 'waits' },
  { sawyer: 'pim', kind: 'insurance', sent: -78, expires: -12, then: 'seen' },
  { sawyer: 'hob', kind: 'insurance', sent: -20, expires: 160, then: { refused: 'The second page is missing: the days it is valid stand there.' } },
  { sawyer: 'kit', kind: 'insurance', sent: -2, expires: 240, then: 'waits' },
];

/** A drawn paper that says plainly that it is none. */
async function draw(by: Viewer, kind: CertificateKind, expires: Day): Promise<Uint8Array<ArrayBuffer>> {
  const title = kind === 'insurance' ? 'Certificate of liability insurance' : 'Native lumber certificate';
  const { paper, done } = openPaper(title);
  paper.font('bold').fontSize(20).text(title).moveDown();
  paper.font('plain').fontSize(12);
  for (const line of [`Made out to: ${by.name}`, `Expires on: ${expires}`, 'By: a company that does not exist', 'This paper is invented for a demonstration and covers nobody.']) paper.text(line).moveDown(0.5);
  paper.end();
  return done;
}

async function send({ sawyer, kind }: Paper, saysUntil: Day, at: Date): Promise<void> {
  const by = await who(sawyer);
  const upload = await certificateUpload(by.id, kind, at);
  const form = new FormData();
  for (const [name, value] of Object.entries(upload.fields)) form.append(name, value);
  form.append('file', new Blob([await draw(by, kind, saysUntil)], { type: 'application/pdf' }), 'certificate.pdf');
  const answer = await fetch(upload.url, { method: 'POST', body: form, redirect: 'manual' });
  if (answer.status !== 303) throw new Error(`Storage did not take the certificate of ${sawyer}: ${answer.status} ${await answer.text()}`);
  await handInCertificate(by, { kind, file: upload.fields['key']?.split('/').at(-1) ?? '', saysUntil }, at);
}

async function decide({ sawyer, kind, then }: Paper, expiresOn: Day, at: Date): Promise<void> {
  const mo = await who('mo');
  const { id: account } = await who(sawyer);
  const { sentAt } = await Certificate.findOne({ where: { sawyerId: account, kind }, rejectOnEmpty: true });
  const looked = { account, kind, sentAt: sentAt?.toISOString() ?? '' };
  if (typeof then === 'object') await refuseCertificate(mo, { ...looked, reason: then.refused }, at);
  else await noteCertificate(mo, { ...looked, expiresOn }, at);
}

/** What sawyers handed in, and what the moderator saw. */
export function tellCertificates(timeline: Timeline): void {
  for (const paper of papers) {
    const expiresOn = timeline.calendar.day(paper.expires);
    timeline.add(paper.sent, '20:15', (at) => send(paper, expiresOn, at));
    if (paper.then !== 'waits') timeline.add(paper.sent + 1, '08:40', (at) => decide(paper, expiresOn, at));
  }
}
