import { createCipheriv, createDecipheriv, hkdfSync, randomBytes } from 'node:crypto';
import { env } from './env.ts';

const keys = new Map<string, Buffer>();

/** One key a purpose, so that what is sealed for one use is useless for another. */
function keyFor(purpose: string): Buffer {
  const known = keys.get(purpose);
  if (known) return known;
  const made = Buffer.from(hkdfSync('sha256', env().APP_SECRET, 'skidway', purpose, 32));
  keys.set(purpose, made);
  return made;
}

/**
 * Seals text with APP_SECRET (AES-256-GCM, a new nonce each time), as base64url.
 * @param bound who or what it belongs to: it opens only with the same words
 */
export function seal(purpose: string, bound: string, text: string): string {
  const nonce = randomBytes(12);
  const cipher = createCipheriv('aes-256-gcm', keyFor(purpose), nonce).setAAD(Buffer.from(bound));
  const sealed = Buffer.concat([cipher.update(text, 'utf8'), cipher.final()]);
  return Buffer.concat([nonce, cipher.getAuthTag(), sealed]).toString('base64url');
}

/** Opens what `seal` made; null when it was changed, made for another purpose or owner, or under another secret. */
export function unseal(purpose: string, bound: string, sealed: string): string | null {
  const bytes = Buffer.from(sealed, 'base64url');
  if (bytes.length < 28) return null;
  try {
    const decipher = createDecipheriv('aes-256-gcm', keyFor(purpose), bytes.subarray(0, 12)).setAAD(Buffer.from(bound)).setAuthTag(bytes.subarray(12, 28));
    return Buffer.concat([decipher.update(bytes.subarray(28)), decipher.final()]).toString('utf8');
  } catch {
    return null;
  }
}
