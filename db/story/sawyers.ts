import type { MillForm } from '../../src/schemas/mill-form.ts';
import { connectPayoutAccount } from '../../src/server/commands/payout-account.ts';
import { saveMill } from '../../src/server/commands/save-mill.ts';
import { saveRateCard } from '../../src/server/commands/save-rate-card.ts';
import { saveSawyerProfile } from '../../src/server/commands/save-sawyer-profile.ts';
import { SawyerProfile } from '../../src/server/models/sawyer.ts';
import { handleMoney, standIn } from './money.ts';
import { who } from './people.ts';
import { rateCards } from './rate-cards.ts';
import type { Timeline } from './timeline.ts';
import type { SawyerProfileForm } from '../../src/schemas/sawyer-profile-form.ts';

interface Sawyer {
  readonly key: string;
  readonly businessName: string;
  readonly about: string;
  readonly zip: string;
  readonly travelMiles: number;
  readonly services: SawyerProfileForm['services'];
  readonly lumberCredential?: string;
  readonly workingDays?: readonly number[];
  readonly noticeDays?: number;
  readonly mills: readonly MillForm[];
  /** Left out: has set up payouts. */
  readonly payouts?: false;
}

/** A band mill of middling size; each mill says what differs. */
const mill = (name: string, changes: Partial<MillForm> = {}): MillForm => ({
  name, kind: 'band', kerfIn: 3 / 32, largestLogIn: 32, widestCutIn: 28, widestBoardIn: 26, longestFt: 20, shortestFt: 4, paceBfPerHour: 200, turnsLogsBy: 'machine', ...changes,
});

const sawyers: readonly Sawyer[] = [
  { key: 'bram', businessName: 'Kerfman Portable Sawing', zip: '54667', travelMiles: 60, services: ['edging', 'delivery', 'metal-detecting'], noticeDays: 2, lumberCredential: 'State native lumber certificate, framing of one’s own buildings',
    about: 'I bring a hydraulic band mill and run the detector over every log before it goes on the bed. I like yard trees; bring me the ugly ones. Stickers cut on site.',
    mills: [mill('Wide band', { paceBfPerHour: 250 }), mill('Little band', { largestLogIn: 22, widestCutIn: 20, widestBoardIn: 18, longestFt: 12, paceBfPerHour: 110, turnsLogsBy: 'hand' })] },
  { key: 'cleo', businessName: 'Bandwheel & Daughter', zip: '54639', travelMiles: 45, services: ['edging', 'resaw'], workingDays: [1, 2, 3, 4, 5],
    about: 'By the hour, from the first cut. You roll, we saw, and nobody argues over tallies.', mills: [mill('Green band', { largestLogIn: 28, widestCutIn: 24, widestBoardIn: 22, longestFt: 16, paceBfPerHour: 150, turnsLogsBy: 'hand' })] },
  { key: 'hob', businessName: 'Hillside Swing Mill', zip: '54634', travelMiles: 80, services: ['delivery'],
    about: 'Swing-blade mill that goes where a trailer does not: it comes in pieces and is set up over the log.', mills: [mill('Swing mill', { kind: 'swing-blade', kerfIn: 0.2, largestLogIn: 48, widestCutIn: 40, widestBoardIn: 10, longestFt: 20, paceBfPerHour: 160, turnsLogsBy: 'hand' })] },
  { key: 'ines', businessName: 'Doglatch Log Works', zip: '54619', travelMiles: 35, services: ['edging'],
    about: 'Paid on the log scale, Doyle, so you know the price before the first cut.', mills: [mill('Orchard mill', { largestLogIn: 26, widestCutIn: 24, widestBoardIn: 20, longestFt: 16, paceBfPerHour: 130, turnsLogsBy: 'hand' })] },
  { key: 'jory', businessName: 'Slabtree Custom Milling', zip: '54656', travelMiles: 70, services: ['edging', 'kiln', 'delivery'], noticeDays: 5,
    about: 'Sawing on your landing, drying at mine: the kiln takes 1,500 bf at a time.', mills: [mill('North band', { largestLogIn: 36, widestCutIn: 32, widestBoardIn: 30, longestFt: 21, paceBfPerHour: 300 })] },
  { key: 'kit', businessName: 'Longbar Slabs', zip: '54623', travelMiles: 90, services: ['slab-flattening'],
    about: 'Wide slabs with a long bar. Slow, and worth it for a big crotch.', mills: [mill('Long bar', { kind: 'chainsaw', kerfIn: 3 / 8, largestLogIn: 58, widestCutIn: 54, widestBoardIn: 54, longestFt: 14, shortestFt: 2, paceBfPerHour: 60, turnsLogsBy: 'hand' })] },
  { key: 'lark', businessName: 'Cantwell Lumber to Measure', zip: '53581', travelMiles: 55, services: ['edging', 'resaw', 'delivery'], lumberCredential: 'A grader comes by the day for loads over 1,000 bf',
    about: 'Twenty years of barn timbers. I cut to a list and I stick to it.', mills: [mill('Timber band', { largestLogIn: 36, widestCutIn: 30, widestBoardIn: 28, longestFt: 26, paceBfPerHour: 260 })] },
  { key: 'moss', businessName: 'Hydraulin Sawing', zip: '54660', travelMiles: 75, services: ['edging', 'delivery', 'metal-detecting'],
    about: 'A big mill with a loader of its own, and a helper who comes along. For a landing with a day’s work or more.', mills: [mill('Big diesel', { kerfIn: 0.11, largestLogIn: 40, widestCutIn: 34, widestBoardIn: 30, longestFt: 24, paceBfPerHour: 450 })] },
  { key: 'nell', businessName: 'Sawdusty Hollow', zip: '54652', travelMiles: 30, services: ['edging'], workingDays: [5, 6, 7],
    about: 'Weekends only. Small mill, fair price, coffee from my own thermos.', mills: [mill('Weekend mill', { largestLogIn: 24, widestCutIn: 22, widestBoardIn: 20, longestFt: 13, paceBfPerHour: 90, turnsLogsBy: 'hand' })] },
  { key: 'otis', businessName: 'Headrig on Wheels', zip: '53821', travelMiles: 65, services: ['resaw'],
    about: 'A circular mill on a truck frame. Fast in pine, not shy of oak, and it wants a firm pad.', mills: [mill('Circle mill', { kind: 'circular', kerfIn: 9 / 32, largestLogIn: 34, widestCutIn: 22, widestBoardIn: 20, longestFt: 20, shortestFt: 6, paceBfPerHour: 550 })] },
  { key: 'pim', businessName: 'Thickplank Live Edge', zip: '54601', travelMiles: 60, services: ['slab-flattening', 'kiln', 'delivery'],
    about: 'Live-edge slabs and wide boards, flattened after they have dried.', mills: [mill('Wide slabber', { largestLogIn: 60, widestCutIn: 58, widestBoardIn: 56, longestFt: 12, paceBfPerHour: 120 })] },
  { key: 'quill', businessName: 'Firstcut Milling', zip: '54664', travelMiles: 25, services: [], payouts: false,
    about: 'New mill, first season. I charge little while I learn and I take my time.', mills: [mill('First mill', { largestLogIn: 26, widestCutIn: 22, widestBoardIn: 20, longestFt: 13, paceBfPerHour: 80, turnsLogsBy: 'hand' })] },
];

async function setUp(sawyer: Sawyer, at: Date): Promise<void> {
  const by = await who(sawyer.key);
  const { businessName, about, zip, travelMiles, services } = sawyer;
  await saveSawyerProfile(by, { businessName, about, zip, travelMiles, services, languages: ['English'], lumberCredential: sawyer.lumberCredential ?? '', workingDays: [...(sawyer.workingDays ?? [1, 2, 3, 4, 5, 6])], noticeDays: sawyer.noticeDays ?? 3 }, at);
  for (const form of sawyer.mills) await saveMill(by, null, form, at);
  const card = rateCards[sawyer.key];
  if (card) await saveRateCard(by, card, at);
  if (sawyer.payouts === false) return;
  await connectPayoutAccount(by, at);
  const { payoutAccount } = await SawyerProfile.findByPk(by.id, { rejectOnEmpty: true });
  await standIn('accounts/onboard', { account: payoutAccount });
  await standIn('quiet', {});
  await handleMoney(at);
}

/** Twelve sawyers with different mills and rate cards; one has not set up payouts yet. */
export function tellSawyers(timeline: Timeline): void {
  for (const [index, sawyer] of sawyers.entries()) timeline.add(-90 + index, '19:00', (at) => setUp(sawyer, at));
}
