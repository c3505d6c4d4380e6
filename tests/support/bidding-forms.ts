import { answerNames, type ListingTyped } from '~/domain/listing/draft.ts';
import type { RateCard } from '~/domain/trade/rate-card.ts';
import { rateCardTyped } from '~/schemas/rate-card-form.ts';
import type { Browser, Fields } from './browser.ts';
import { typedListing } from './listing-forms.ts';
import { OAK_CARD } from './rate-cards.ts';

/** A day so many days from now, as the running product's clock has it. */
export const dayAhead = (days: number): string => new Date(Date.now() + days * 86_400_000).toISOString().slice(0, 10);

/** The listing's form as a page without script posts it. */
export function listingFields(typed: ListingTyped, deed: string, typedVersion = ''): Fields {
  const rows = (name: 'logs' | 'pieces'): [string, string][] => typed[name].flatMap((row, index) => Object.entries(row).map(([field, value]): [string, string] => [`${name}.${index}.${field}`, value]));
  return { ...Object.fromEntries([...answerNames.map((name): [string, string] => [name, typed[name]]), ...rows('logs'), ...rows('pieces')]), deed, typedVersion };
}

/** A listing published by its form: three oak logs near 54665 that anybody may bid on for three weeks. @returns its number */
export async function publishListing(owner: Browser, changes: Partial<ListingTyped> = {}): Promise<number> {
  const answer = await owner.post('/listings/new', listingFields(typedListing({ cameDownOn: dayAhead(-10), closesOn: dayAhead(20), ...changes }), 'publish'));
  const number = Number(/\/listings\/(\d+)/.exec(answer.headers.get('location') ?? '')?.[1]);
  if (answer.status !== 303 || !number) throw new Error(`Publishing answered ${answer.status}: ${await answer.text()}`);
  return number;
}

export const profileFields = (businessName: string): Fields => ({ businessName, about: '', zip: '54656', travelMiles: '60', languages: '', 'workingDays[]': ['1', '2', '3', '4', '5', '6'], noticeDays: '1' });
export const millFields: Fields = {
  name: 'Wide band', kind: 'band', kerfIn: '3/32', largestLogIn: '30', widestCutIn: '26', widestBoardIn: '24', longestFt: '18', shortestFt: '4', paceBfPerHour: '200', turnsLogsBy: 'machine',
};

/** Fills in profile, mill and rate card by their forms, in the order a sawyer is led through them. */
export async function setUpSawing(sawyer: Browser, businessName: string, card: RateCard = OAK_CARD, next = ''): Promise<Response> {
  let last = await sawyer.post(`/sawyer/profile${next}`, profileFields(businessName));
  for (const [path, fields] of [['/sawyer/mill', millFields], ['/sawyer/rates', rateCardTyped(card)]] as const) {
    if (last.status !== 303) throw new Error(`Setting up answered ${last.status}: ${await last.text()}`);
    last = await sawyer.post(next === '' ? path : (last.headers.get('location') ?? path), fields);
  }
  return last;
}

/** The bid's form as it is shown, filled in as far as the page has it: hidden fields, chosen boxes and text. */
export async function bidFields(sawyer: Browser, number: number, changes: Fields = {}): Promise<Fields> {
  const html = await (await sawyer.get(`/listings/${number}/bid`)).text();
  const value = (name: string): string => new RegExp(`name="${name}"[^>]*? value="([^"]*)"`).exec(html)?.[1] ?? '';
  const chosen = (name: string): string => new RegExp(`name="${name}" value="([^"]*)" checked`).exec(html)?.[1] ?? '';
  return {
    millId: value('millId') || chosen('millId'), listingRevision: value('listingRevision'), offBearer: chosen('offBearer'), waste: chosen('waste'), roadMiles: value('roadMiles'), metalCap: value('metalCap'),
    ownBf: '', ownReason: '', message: '', 'days[]': [dayAhead(9)], ...changes,
  };
}
