import { createHash } from 'node:crypto';
import { seal, unseal } from './sealing.ts';

const PURPOSE = 'calendar-feed';

/** What is kept of a feed's secret to find its row. The secret has 256 random bits, so a plain hash cannot be turned round. */
export const feedSecretHash = (secret: string): string => createHash('sha256').update(secret).digest('hex');

/** The secret as it is kept for its owner to see again. */
export const sealFeedSecret = (sawyerId: string, secret: string): string => seal(PURPOSE, sawyerId, secret);

/** The secret again; null when it was sealed under another APP_SECRET. */
export const openFeedSecret = (sawyerId: string, sealed: string): string | null => unseal(PURPOSE, sawyerId, sealed);
