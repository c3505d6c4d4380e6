import { certificateNames, type CertificateKind } from '~/domain/certificate.ts';
import { formatDayWithYear, type Day } from '~/domain/time.ts';
import { letter } from './letter.ts';
import type { MailMessage } from '~/server/services/mail.ts';

interface To {
  readonly name: string;
  readonly email: string;
}

/** To someone whose second factor a moderator ended. */
export const secondFactorEnded = (to: To): MailMessage =>
  letter(to.email, 'Signing in no longer asks for a code', to.name, [
    'A moderator ended the second step of signing in for your account, because you asked for it. Every session was ended: sign in again with your password.',
    'Set up the second step anew under Account. If you did not ask for this, change your password now and answer this letter.',
  ]);

/** To someone who reported something, once it was looked at. What came of it concerns another person and is not told. */
export const reportHandled = (to: To, reportedAt: Date): MailMessage =>
  letter(to.email, 'We have looked at your report', to.name, [
    `A moderator has looked at what you reported on ${formatDayWithYear(reportedAt.toISOString().slice(0, 10))}, and done what was needed.`,
    'What came of it concerns someone else, so we do not write it here. If it happens again, report it again.',
  ]);

/** To whoever wrote or took what a moderator took out. */
export const takenOut = (to: To, what: string, reason: string): MailMessage =>
  letter(to.email, `A ${what} of yours was taken out`, to.name, [
    `A moderator took out a ${what} of yours. Nobody sees it any more. The reason:`,
    reason,
    'If you think that this is wrong, answer this letter.',
  ]);

/** To a sawyer whose certificate a moderator has seen. */
export const certificateSeen = (to: To, kind: CertificateKind, expiresOn: Day, link: string): MailMessage =>
  letter(to.email, `Your ${certificateNames[kind]} was seen`, to.name, [
    `Landowners now read beside your name: certificate seen, expires on ${formatDayWithYear(expiresOn)}.`,
    'Send the next one before that day; we remind you a month and a week ahead.',
    { button: 'See your page', href: link },
  ]);

/** To a sawyer whose certificate a moderator could not take. */
export const certificateRefused = (to: To, kind: CertificateKind, reason: string, link: string): MailMessage =>
  letter(to.email, `Your ${certificateNames[kind]} cannot be taken`, to.name, [reason, { button: 'Send another', href: link }]);

/** To a sawyer whose certificate runs out soon, or has run out. */
export const certificateRunsOut = (to: To, kind: CertificateKind, expiresOn: Day, expired: boolean, link: string): MailMessage =>
  letter(to.email, `Your ${certificateNames[kind]} ${expired ? 'has run out' : `runs out on ${formatDayWithYear(expiresOn)}`}`, to.name, [
    expired ? `It expired on ${formatDayWithYear(expiresOn)}. Landowners no longer read that one was seen.` : `Until then landowners read beside your name: certificate seen, expires on ${formatDayWithYear(expiresOn)}. After that day they no longer do.`,
    'Send the next one as a PDF or a picture of the paper; a moderator looks at it.',
    { button: 'Send the next one', href: link },
  ]);
