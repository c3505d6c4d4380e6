import { formatCents } from '~/domain/money.ts';
import { dayEstimate, estimateFacts } from '~/domain/trade/day-estimate.ts';
import { measuresSaid, waitsForWord } from '~/domain/trade/day-logs.ts';
import { paths } from '~/domain/paths.ts';
import { holdWarning, mayGoOnAfterMetal, type HoldWarning } from '~/domain/trade/on-the-day.ts';
import { holdNears, logsToAgree, metalStops } from '~/emails/tally-letters.ts';
import { bidOfDay } from '../day-logs.ts';
import { enqueue } from '../jobs/queue.ts';
import { type Booking, MetalHit, type Tally } from '../models/index.ts';
import { linkTo, partiesOf } from '../parties.ts';
import { frozenTerms, tallyWork } from '../tally-work.ts';
import { record } from '../transition.ts';
import type { Viewer } from '../viewer.ts';

const order: readonly HoldWarning[] = ['none', 'at-80', 'at-95', 'stop'];

/** After two metal hits sawing stops until the landowner allows more; they are told. `before`: the hits there were. */
export async function watchMetal(by: Viewer, booking: Booking, tally: Tally, before: number): Promise<void> {
  const hits = await MetalHit.findAll({ where: { tallyId: tally.id, removedAt: null } });
  if (hits.length <= before || mayGoOnAfterMetal(hits.length, tally.metalAllowed)) return;
  const terms = await frozenTerms(booking);
  const spent = hits.reduce((sum, { outcome }) => sum + (outcome === 'destroyed' ? terms.card.metal.destroyedCents : terms.card.metal.resharpenedCents), 0);
  const { landowner } = await partiesOf(booking);
  await enqueue('send-mail', metalStops(landowner, by.name, hits.length, Math.max(0, terms.metalCapCents - spent), linkTo(paths.signTally(booking.number))));
}

/** Logs measured or added just now that are more than the landowner knows of: they are told what it changes, and asked. */
export async function watchLogs(by: Viewer, booking: Booking, changed: ReadonlySet<string>): Promise<void> {
  if (changed.size === 0) return;
  const work = await tallyWork(booking);
  const waiting = (work?.onTheDay ?? []).flatMap((log, index) => {
    const waits = changed.has(log.id) ? waitsForWord(log, work?.mill ?? null) : [];
    return waits.length > 0 ? [[`${work?.logs[index]?.label || `Log ${index + 1}`}, ${measuresSaid(log.measured ?? log.listed)}`, waits.join(' ')] as const] : [];
  });
  if (!work || waiting.length === 0) return;
  const bid = await bidOfDay(booking);
  const estimate = bid && work.mill ? dayEstimate(work.onTheDay, work.mill, bid, work.terms) : null;
  const { landowner } = await partiesOf(booking);
  await enqueue('send-mail', logsToAgree(landowner, by.name, waiting, estimate ? estimateFacts(estimate, work.heldCents) : [], linkTo(paths.signTally(booking.number))));
}

/** Both are warned once each when the work reaches 80, 95 and 100 % of the limit; a higher limit begins anew. */
export async function watchHold(by: Viewer, booking: Booking, tally: Tally, at: Date): Promise<void> {
  const work = await tallyWork(booking);
  if (!work) return;
  const { costCents } = work.settlement;
  const now = holdWarning(costCents, work.limitCents);
  if (now === tally.holdWarned) return;
  const risen = order.indexOf(now) > order.indexOf(tally.holdWarned);
  await tally.update({ holdWarned: now });
  if (!risen || now === 'none') return;
  await record(by, 'nearTheHold', 'booking', booking.id, at, { data: { costCents, limitCents: work.limitCents, warning: now } });
  const { landowner, sawyer } = await partiesOf(booking);
  const facts = [['The work so far', formatCents(costCents)], ['Held', formatCents(work.heldCents)], ['Allowed in all', formatCents(work.limitCents)]] as const;
  await enqueue('send-mail', holdNears(landowner, now, facts, linkTo(paths.signTally(booking.number)), true));
  await enqueue('send-mail', holdNears(sawyer, now, facts, linkTo(paths.tally(booking.number)), false));
}
