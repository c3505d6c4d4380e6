import type { Waste as ListedWaste } from '~/domain/listing/answers.ts';
import { formatDollars } from '~/domain/money.ts';
import { wastesOffered } from '~/domain/trade/rate-card.ts';
import { bidForm, bidTermsForm } from '~/schemas/bid-form.ts';
import type { FrozenEstimate } from '../bid-work.ts';
import { changeBid } from '../commands/change-bid.ts';
import { placeBid } from '../commands/place-bid.ts';
import { Refusal } from '../errors.ts';
import { type BidPage, type BidPreview, previewBid } from '../queries/bid-page.ts';
import type { ReadyMessageView } from '../queries/ready-messages.ts';
import type { Viewer } from '../viewer.ts';
import type { Typed } from './read-form.ts';
import { type Taken, takeForm } from './take-form.ts';

/** What posting the bid's form came to: only looked at, or kept. */
export type BidTaken = 'looked' | 'placed' | 'changed';

type PostedPage = Parameters<typeof takeForm>[0];

/** Takes the posted form: works it out when the sawyer only looks, else places the bid or changes the live one. */
export function takeBid(page: PostedPage, look: boolean, by: Viewer, seen: BidPage, at: Date): Promise<Taken<BidTaken>> {
  if (look) {
    return takeForm(page, bidTermsForm, async (form): Promise<BidTaken> => {
      await previewBid(seen, form, at);
      return 'looked';
    });
  }
  return takeForm(page, bidForm, async (form): Promise<BidTaken> => {
    const { bid } = seen;
    if (bid === null) await placeBid(by, seen.listing.number, form, at);
    else await changeBid(by, bid.id, form, at);
    return bid === null ? 'placed' : 'changed';
  });
}

const dollars = (cents: number): string => formatDollars(cents).replace('$', '');
const count = (value: number | undefined): string => (value === undefined ? '' : String(value));

/** The form as it is opened: with the live bid as it stands, or begun from the mill, the rate card and what the landowner asks for. */
export function bidTyped({ listing, setUp, mills, miles, bid }: BidPage): Typed {
  if (bid !== null) {
    const { terms, options } = bid.estimate as FrozenEstimate;
    const own = bid.status === 'open' && bid.overrideReason !== null;
    return {
      millId: bid.millId, offBearer: bid.offBearer, waste: terms.waste, roadMiles: String(bid.roadMiles), metalCap: dollars(bid.metalCapCents),
      stickers: count(options.stickers), deliveryLoads: count(options.deliveryLoads), ownBf: own ? String(bid.expectedBfHundredths / 100) : '', ownReason: own ? (bid.overrideReason ?? '') : '',
      days: bid.daysOffered, message: bid.message,
    };
  }
  const asked = (listing.waste as ListedWaste | null)?.slabs ?? 'left';
  const helpers = (listing.access as { readonly helpers?: number } | null)?.helpers ?? 0;
  return {
    millId: (mills.find(({ fit }) => fit.fits) ?? mills[0])?.mill.id ?? '', offBearer: helpers > 0 ? 'landowner-provides' : 'sawyer-brings',
    waste: setUp.card && wastesOffered(setUp.card).includes(asked) ? asked : 'left', roadMiles: count(miles ?? undefined), metalCap: setUp.card ? dollars(setUp.card.metal.capCents) : '',
    stickers: '', deliveryLoads: '', ownBf: '', ownReason: '', days: [], message: '',
  };
}

/** The form with the chosen ready message added to its message; unchanged when none was chosen. */
export function withReadyMessage(typed: Typed, ready: readonly ReadyMessageView[]): Typed {
  const chosen = ready.find(({ id }) => id === typed['readyMessage']);
  if (!chosen) return typed;
  const before = String(typed['message'] ?? '').trim();
  return { ...typed, message: before === '' ? chosen.body : `${before}\n\n${chosen.body}` };
}

/** The figures of a form as it stands, or why there are none yet. */
export async function previewTyped(seen: BidPage, typed: Typed, at: Date): Promise<BidPreview | { readonly not: string }> {
  const read = bidTermsForm.safeParse({ ...typed, days: [], listingRevision: String(seen.listing.revision) });
  if (!read.success) return { not: 'Shown once the fields can be read.' };
  try {
    return (await previewBid(seen, read.data, at)) ?? { not: 'Choose one of your mills.' };
  } catch (error) {
    if (error instanceof Refusal) return { not: error.problems[0]?.message ?? error.message };
    throw error;
  }
}
