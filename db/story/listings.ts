import { publishListing } from '../../src/server/commands/publish-listing.ts';
import { reviseListing } from '../../src/server/commands/revise-listing.ts';
import { saveDraft } from '../../src/server/commands/save-draft.ts';
import { withdrawListing } from '../../src/server/commands/withdraw-listing.ts';
import { asListingTyped } from '../../src/domain/listing/draft.ts';
import { Listing } from '../../src/server/models/listing.ts';
import { pointOfZip } from '../../src/server/services/places.ts';
import { adasTrees } from './listings-ada.ts';
import { bookedTrees, otherTrees } from './listings-storm.ts';
import { who } from './people.ts';
import type { Timeline } from './timeline.ts';
import { typedForm, type Tree } from './trees.ts';

export const trees: readonly Tree[] = [...adasTrees, ...bookedTrees, ...otherTrees];

const numbers = new Map<string, number>();

/** The number that a tree's listing got. @throws when it has not been told yet */
export function numberOf(key: string): number {
  const number = numbers.get(key);
  if (number === undefined) throw new Error(`The listing ${key} is told before it is listed.`);
  return number;
}

/** The listing as it stands now. */
export const listingOf = (key: string): Promise<Listing> => Listing.findOne({ where: { number: numberOf(key) }, rejectOnEmpty: true });

async function list(tree: Tree, timeline: Timeline, at: Date): Promise<void> {
  const by = await who(tree.owner);
  const middle = pointOfZip(tree.zip);
  if (!middle) throw new Error(`No place is known for ZIP ${tree.zip}.`);
  const draft = await saveDraft(by, { number: null, typedVersion: null, typed: typedForm(tree, middle, timeline.calendar) }, at);
  numbers.set(tree.key, draft.number);
  if (tree.listed !== null) await publishListing(by, draft, at);
}

/** One more log turns up: the listing gets a revision, and its open bids have to be confirmed. */
async function reviseWalnut(at: Date): Promise<void> {
  const listing = await listingOf('tilda-walnut');
  const typed = asListingTyped(listing.typed);
  const [first] = typed.logs;
  if (!first) throw new Error('The listing has logs.');
  const found = { ...first, id: crypto.randomUUID(), smallEnd: '11', largeEnd: '', note: 'found under the crown' };
  await reviseListing(await who('tilda'), { number: numberOf('tilda-walnut'), typedVersion: listing.typedVersion, typed: { ...typed, logs: [...typed.logs, found] } }, at);
}

/** Some forty listings; two are taken back and one is changed after the first bids. */
export function tellListings(timeline: Timeline): void {
  for (const [index, tree] of trees.entries()) timeline.add(tree.listed ?? -3, `${String(8 + (index % 10)).padStart(2, '0')}:15`, (at) => list(tree, timeline, at));
  timeline.add(-5, '20:15', reviseWalnut);
  timeline.add(-11, '18:40', async (at) => withdrawListing(await who('anders'), { number: numberOf('anders-oak'), reason: 'Sold for firewood.' }, at));
  timeline.add(-12, '07:50', async (at) => withdrawListing(await who('berit'), { number: numberOf('berit-pine'), reason: '' }, at));
}
