import { chargedExtras } from '~/domain/trade/day-job.ts';
import { chargedMeasures } from '~/domain/trade/day-logs.ts';
import { tallyContent } from '~/domain/trade/tally-content.ts';
import type { TallyView } from '~/schemas/tally-view.ts';

/** What a signature under this view is bound to: the same text as the server's. */
export const contentOf = (view: TallyView): string =>
  tallyContent({ ...view, extras: chargedExtras(view), logs: view.logs.map((log) => ({ id: log.id, ...chargedMeasures(log, view.mill) })) });

/** SHA-256 of what is on the screen, in hexadecimal, worked out on the phone. */
export async function hashOf(view: TallyView): Promise<string> {
  const digest = await crypto.subtle.digest('SHA-256', new TextEncoder().encode(contentOf(view)));
  return [...new Uint8Array(digest)].map((byte) => byte.toString(16).padStart(2, '0')).join('');
}
