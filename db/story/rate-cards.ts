import type { RateCard, SawingBasis } from '../../src/domain/trade/rate-card.ts';

// Invented figures, plausible for custom sawing and for the demo only.

/** What every card of the demo has unless it says otherwise. */
const plain = (basis: SawingBasis, changes: Partial<RateCard> = {}): RateCard => ({
  basis,
  slabs: null,
  surcharges: { quartersawnPerBf: 8, underFourQuarterPerBf: 5, overWide: null, overLong: null, dirtyPerLog: 500 },
  extras: { movingMill: 6_000, waitingPerHour: 5_000, wasteHauled: null, wasteBundled: 4_000, stickerEach: 60, deliveryPerLoad: null },
  cullOpening: { kind: 'hour', cents: 8_000 },
  setUpPerLanding: 7_500,
  travel: { freeMiles: 25, perMileCents: 200, owedAgainAfterRain: false },
  minimum: { cents: 20_000, covers: 'whole-job' },
  metal: { resharpenedCents: 1_000, destroyedCents: 3_500, capCents: 10_500 },
  tax: null,
  ...changes,
});

const perBf = (withoutCents: number, withCents: number): { withCents: number; withoutCents: number } => ({ withCents, withoutCents });

/** Each sawyer's card: every basis is among them. */
export const rateCards: Readonly<Record<string, RateCard>> = {
  bram: plain({ kind: 'lumber-tally', rule: 'hardwood', perBf: perBf(45, 55) }, { extras: { movingMill: 6_000, waitingPerHour: 6_000, wasteHauled: 9_000, wasteBundled: 4_500, stickerEach: 60, deliveryPerLoad: 8_500 } }),
  cleo: plain({ kind: 'hourly', from: 'first-cut', perHour: perBf(8_500, 10_500) }, { setUpPerLanding: 6_000, minimum: { cents: 25_000, covers: 'whole-job' } }),
  hob: plain({ kind: 'lumber-tally', rule: 'exact', perBf: perBf(50, 60) }, { setUpPerLanding: 9_000, metal: { resharpenedCents: 1_000, destroyedCents: 4_000, capCents: 12_000 } }),
  ines: plain({ kind: 'log-scale', rule: 'doyle', smallestLog: { diameterIn: 12, lengthFt: 8 }, perBf: perBf(58, 68) }, { setUpPerLanding: 5_000, minimum: { cents: 15_000, covers: 'sawing-only' } }),
  jory: plain({ kind: 'log-scale', rule: 'internationalQuarter', smallestLog: { diameterIn: 10, lengthFt: 8 }, perBf: perBf(42, 50) }, { travel: { freeMiles: 20, perMileCents: 150, owedAgainAfterRain: true } }),
  kit: plain({ kind: 'hourly', from: 'arrival', perHour: perBf(9_000, 11_000) }, { slabs: { kind: 'square-foot', cents: 650 }, setUpPerLanding: 8_000, metal: { resharpenedCents: 1_500, destroyedCents: 4_000, capCents: 8_000 } }),
  lark: plain({ kind: 'log-scale', rule: 'scribnerDecimalC', smallestLog: null, perBf: perBf(44, 52) }, { setUpPerLanding: 10_000, travel: { freeMiles: 30, perMileCents: 225, owedAgainAfterRain: false } }),
  moss: plain({ kind: 'hourly', from: 'arrival', perHour: perBf(11_500, 12_500) }, { setUpPerLanding: 12_500, minimum: { cents: 30_000, covers: 'whole-job' }, tax: { pct: 5.5, label: 'Sales tax, as stated by the sawyer' } }),
  nell: plain({ kind: 'lumber-tally', rule: 'hardwood', perBf: perBf(38, 48) }, { setUpPerLanding: 5_000, minimum: { cents: 15_000, covers: 'whole-job' }, surcharges: { quartersawnPerBf: 6, underFourQuarterPerBf: 4, overWide: { aboveIn: 24, perLogCents: 1_500 }, overLong: { aboveFt: 14, perLogCents: 1_000 }, dirtyPerLog: 400 } }),
  otis: plain({ kind: 'lumber-tally', rule: 'exact', perBf: perBf(35, 40) }, { setUpPerLanding: 15_000, minimum: { cents: 30_000, covers: 'whole-job' }, travel: { freeMiles: 20, perMileCents: 300, owedAgainAfterRain: true } }),
  pim: plain({ kind: 'lumber-tally', rule: 'hardwood', perBf: perBf(55, 65) }, { slabs: { kind: 'board-foot', cents: 90 }, extras: { movingMill: 7_000, waitingPerHour: 6_000, wasteHauled: 10_000, wasteBundled: 5_000, stickerEach: 75, deliveryPerLoad: 9_500 } }),
  quill: plain({ kind: 'lumber-tally', rule: 'hardwood', perBf: perBf(36, 46) }, { setUpPerLanding: 5_000, minimum: { cents: 15_000, covers: 'whole-job' } }),
};
