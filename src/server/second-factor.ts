import { generateSecret, generateURI, verifySync } from 'otplib';
import { create } from 'qrcode';
import { seal, unseal } from './sealing.ts';

/** A new secret for a time-based one-time password (RFC 6238: SHA-1, six digits, 30 seconds), in base32. */
export const newSecondFactor = (): string => generateSecret();

/** The address that an authenticator app reads from the picture. */
export const secondFactorUri = (email: string, secret: string): string => generateURI({ issuer: 'Skidway', label: email, secret });

/** The secret as it is kept in the account's row. */
export const sealSecret = (accountId: string, secret: string): string => seal('second factor', accountId, secret);
/** The secret of a sealed one; null when it was sealed for someone else or under another APP_SECRET. */
export const openSecret = (accountId: string, sealed: string): string | null => unseal('second factor', accountId, sealed);

/**
 * Checks a code, one step of 30 seconds early or late.
 * @param lastStep the step of the last code that was accepted: that one and older are refused, so a code works once
 * @returns the code's step, to be kept; null when the code is wrong or used.
 */
export function codeStep(secret: string, typed: string, at: Date, lastStep: number | null): number | null {
  const token = typed.replace(/\s/g, '');
  if (!/^\d{6}$/.test(token)) return null;
  const result = verifySync({ secret, token, epoch: Math.floor(at.getTime() / 1000), epochTolerance: 30, ...(lastStep === null ? {} : { afterTimeStep: lastStep }) });
  return result.valid && 'timeStep' in result ? result.timeStep : null;
}

/** A QR code (ISO/IEC 18004) as one SVG path on a square of `size` units, with the four quiet units round it. */
export function qrPath(text: string): { readonly size: number; readonly path: string } {
  const { modules } = create(text, { errorCorrectionLevel: 'M' });
  const parts: string[] = [];
  for (let y = 0; y < modules.size; y += 1) {
    for (let x = 0; x < modules.size; x += 1) if (modules.get(y, x)) parts.push(`M${x + 4} ${y + 4}h1v1h-1z`);
  }
  return { size: modules.size + 8, path: parts.join('') };
}
