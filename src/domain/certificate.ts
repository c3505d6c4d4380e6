/** A certificate of insurance as a sawyer hands it in: a PDF or a picture of the paper. */

/** The largest file taken, in bytes. */
export const largestCertificateBytes = 10 * 1024 * 1024;

/** Where the file of an upload lies in storage; private, and read by moderators only. */
export const certificateKey = (accountId: string, fileId: string): string => `certificates/${accountId}/${fileId}`;

const kinds = [
  { type: 'application/pdf', extension: 'pdf', begins: [0x25, 0x50, 0x44, 0x46, 0x2d] },
  { type: 'image/jpeg', extension: 'jpg', begins: [0xff, 0xd8, 0xff] },
  { type: 'image/png', extension: 'png', begins: [0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a] },
] as const;

/** What a file is by its first bytes (signatures of ISO 32000, ISO 10918 and ISO 15948); null for anything else. */
export function certificateKind(bytes: Uint8Array): { readonly type: string; readonly extension: string } | null {
  return kinds.find(({ begins }) => begins.every((byte, index) => bytes[index] === byte)) ?? null;
}
