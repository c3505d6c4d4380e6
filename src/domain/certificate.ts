import { addDays, type Day } from './time.ts';

/** Papers that a sawyer hands in and a moderator looks at: a PDF or a picture of the paper. */
export const certificateKinds = ['insurance', 'lumber'] as const;
export type CertificateKind = (typeof certificateKinds)[number];

/** What each is called, in the middle of a sentence. */
export const certificateNames: Readonly<Record<CertificateKind, string>> = { insurance: 'certificate of insurance', lumber: 'credential for lumber of a dwelling' };

/** The kind that a word of an address names; the first when it names none. */
export const certificateKindOf = (word: string | null | undefined): CertificateKind => certificateKinds.find((kind) => kind === word) ?? 'insurance';

/** The largest file taken, in bytes. */
export const largestCertificateBytes = 10 * 1024 * 1024;

/**
 * How long a file is kept. One that waits for a moderator, and the one behind what landowners read, are kept as long as that is so. After
 * it expired, was refused, or another took its place as the one seen, a file stays for `KEPT_DAYS`: a sawyer may object, or a landowner ask
 * what the moderator saw. One that was replaced before anybody looked, or belongs to an account that is closed, goes as soon as its upload
 * form has run out (`FORM_HOURS`); one that was sent and never handed in after `AWAITED_HOURS`.
 */
export const KEPT_DAYS = 30;
export const FORM_HOURS = 2;
export const AWAITED_HOURS = 24;

/** Letters go out when so many days are left, and once on the first day when none is. */
export const REMINDED_DAYS = [30, 7, -1] as const;

/** How many letters about its running out are due for a certificate. @param today in any zone: a day sooner or later is no matter */
export const remindersDue = (expiresOn: Day, today: Day): number => REMINDED_DAYS.filter((left) => today >= addDays(expiresOn, -left)).length;

/** Whether a certificate runs out so soon that the next one should be sent. */
export const runsOutSoon = (expiresOn: Day, today: Day): boolean => today >= addDays(expiresOn, -REMINDED_DAYS[0]);

/** Where the file of an upload lies in storage; private, and read by moderators only. */
export const certificateKey = (accountId: string, fileId: string): string => `certificates/${accountId}/${fileId}`;

const kinds = [
  { type: 'application/pdf', extension: 'pdf', begins: [0x25, 0x50, 0x44, 0x46, 0x2d] },
  { type: 'image/jpeg', extension: 'jpg', begins: [0xff, 0xd8, 0xff] },
  { type: 'image/png', extension: 'png', begins: [0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a] },
] as const;

/** What a file is by its first bytes (signatures of ISO 32000, ISO 10918 and ISO 15948); null for anything else. */
export function certificateFileType(bytes: Uint8Array): { readonly type: string; readonly extension: string } | null {
  return kinds.find(({ begins }) => begins.every((byte, index) => bytes[index] === byte)) ?? null;
}
