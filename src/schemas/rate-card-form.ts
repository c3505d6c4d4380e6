import { z } from 'zod';
import { formatFraction } from '~/domain/measure.ts';
import type { Cents } from '~/domain/money.ts';
import { refused, type Result } from '~/domain/result.ts';
import type { RateCard, SawingBasis } from '~/domain/trade/rate-card.ts';
import { choice, feet, fieldOf, inches, money, moneyOrZero, number, optional, text, ticked, whole } from './fields.ts';

/** A rate must be said; `missing` names which one, where two stand below each other. */
const rate = (missing: string) => (typed: string): Result<Cents> => (typed === '' ? refused('', missing) : money(typed));

/**
 * A rate card as its form posts it. Every field is plain text; those that belong to another basis than the chosen one are kept on the
 * page but not asked for. Understood as a `RateCard`.
 */
export const rateCardForm = z
  .object({
    basis: fieldOf(choice(['lumber-tally', 'log-scale', 'hourly'], 'Choose what you charge by.')),
    tallyRule: fieldOf(optional(choice(['hardwood', 'exact'], 'Choose how the tally is counted.'))),
    logRule: fieldOf(optional(choice(['internationalQuarter', 'doyle', 'scribnerDecimalC'], 'Choose the log rule.'))),
    smallestDiameterIn: fieldOf(optional(inches(4, 60))),
    smallestLengthFt: fieldOf(optional(feet(4, 40))),
    clockFrom: fieldOf(optional(choice(['first-cut', 'arrival'], 'Say when the clock starts.'))),
    priceWithout: fieldOf(rate('Write your rate when the landowner provides the off-bearer, in dollars, like 0.45.')),
    priceWith: fieldOf(rate('Write your rate when you bring the off-bearer, in dollars; the same figure if it makes no difference.')),
    slabBy: fieldOf(choice(['none', 'square-foot', 'board-foot'], 'Choose how slabs are charged.')),
    slabPrice: fieldOf(optional(money)),
    quartersawn: fieldOf(moneyOrZero),
    underFourQuarter: fieldOf(moneyOrZero),
    overWideAboveIn: fieldOf(optional(inches(8, 120))),
    overWidePrice: fieldOf(moneyOrZero),
    overLongAboveFt: fieldOf(optional(feet(4, 80))),
    overLongPrice: fieldOf(moneyOrZero),
    dirty: fieldOf(moneyOrZero),
    movingMill: fieldOf(optional(money)),
    waiting: fieldOf(moneyOrZero),
    wasteHauled: fieldOf(optional(money)),
    wasteBundled: fieldOf(optional(money)),
    sticker: fieldOf(optional(money)),
    delivery: fieldOf(optional(money)),
    cullBy: fieldOf(choice(['none', 'hour', 'pass'], 'Choose how opening a rotten log is charged.')),
    cullPrice: fieldOf(optional(money)),
    setUp: fieldOf(moneyOrZero),
    freeMiles: fieldOf(whole(0, 500, 'miles')),
    perMile: fieldOf(moneyOrZero),
    travelAgain: ticked,
    minimum: fieldOf(moneyOrZero),
    minimumCovers: fieldOf(choice(['whole-job', 'sawing-only'], 'Say what the minimum covers.')),
    resharpened: fieldOf(moneyOrZero),
    destroyed: fieldOf(moneyOrZero),
    metalCap: fieldOf(moneyOrZero),
    taxPct: fieldOf(optional(number(0, 20, '%'))),
    taxLabel: fieldOf(text(60)),
  })
  .transform((form, ctx): RateCard => {
    const need = (path: keyof typeof form, message: string): void => ctx.addIssue({ code: 'custom', path: [path], message });
    if (form.basis === 'lumber-tally' && form.tallyRule === null) need('tallyRule', 'Choose how the tally is counted.');
    if (form.basis === 'log-scale' && form.logRule === null) need('logRule', 'Choose the log rule.');
    if (form.basis === 'hourly' && form.clockFrom === null) need('clockFrom', 'Say when the clock starts.');
    if ((form.smallestDiameterIn === null) !== (form.smallestLengthFt === null)) need(form.smallestDiameterIn === null ? 'smallestDiameterIn' : 'smallestLengthFt', 'Give the smallest log both its diameter and its length, or neither.');
    if (form.slabBy !== 'none' && form.slabPrice === null) need('slabPrice', 'Give the price for slabs.');
    if (form.cullBy !== 'none' && form.cullPrice === null) need('cullPrice', 'Give the price for opening a rotten log.');
    if (form.overWidePrice > 0 && form.overWideAboveIn === null) need('overWideAboveIn', 'Say above which diameter this is charged.');
    if (form.overLongPrice > 0 && form.overLongAboveFt === null) need('overLongAboveFt', 'Say above which length this is charged.');
    if ((form.taxPct ?? 0) > 0 && form.taxLabel === '') need('taxLabel', 'Name the tax, as it should stand on the bill.');
    return {
      basis: basisOf(form),
      slabs: form.slabBy === 'none' ? null : { kind: form.slabBy, cents: form.slabPrice ?? 0 },
      surcharges: {
        quartersawnPerBf: form.quartersawn,
        underFourQuarterPerBf: form.underFourQuarter,
        overWide: form.overWideAboveIn === null || form.overWidePrice === 0 ? null : { aboveIn: form.overWideAboveIn, perLogCents: form.overWidePrice },
        overLong: form.overLongAboveFt === null || form.overLongPrice === 0 ? null : { aboveFt: form.overLongAboveFt, perLogCents: form.overLongPrice },
        dirtyPerLog: form.dirty,
      },
      extras: { movingMill: form.movingMill, waitingPerHour: form.waiting, wasteHauled: form.wasteHauled, wasteBundled: form.wasteBundled, stickerEach: form.sticker, deliveryPerLoad: form.delivery },
      cullOpening: form.cullBy === 'none' ? null : { kind: form.cullBy, cents: form.cullPrice ?? 0 },
      setUpPerLanding: form.setUp,
      travel: { freeMiles: form.freeMiles, perMileCents: form.perMile, owedAgainAfterRain: form.travelAgain },
      minimum: { cents: form.minimum, covers: form.minimumCovers },
      metal: { resharpenedCents: form.resharpened, destroyedCents: form.destroyed, capCents: form.metalCap },
      tax: form.taxPct === null || form.taxPct === 0 ? null : { pct: form.taxPct, label: form.taxLabel },
    };
  });

interface BasisFields {
  readonly basis: SawingBasis['kind'];
  readonly tallyRule: 'hardwood' | 'exact' | null;
  readonly logRule: 'internationalQuarter' | 'doyle' | 'scribnerDecimalC' | null;
  readonly smallestDiameterIn: number | null;
  readonly smallestLengthFt: number | null;
  readonly clockFrom: 'first-cut' | 'arrival' | null;
  readonly priceWith: Cents;
  readonly priceWithout: Cents;
}

function basisOf(form: BasisFields): SawingBasis {
  const price = { withCents: form.priceWith, withoutCents: form.priceWithout };
  const smallestLog = form.smallestDiameterIn === null || form.smallestLengthFt === null ? null : { diameterIn: form.smallestDiameterIn, lengthFt: form.smallestLengthFt };
  switch (form.basis) {
    case 'lumber-tally':
      return { kind: 'lumber-tally', rule: form.tallyRule ?? 'hardwood', perBf: price };
    case 'log-scale':
      return { kind: 'log-scale', rule: form.logRule ?? 'internationalQuarter', smallestLog, perBf: price };
    case 'hourly':
      return { kind: 'hourly', from: form.clockFrom ?? 'first-cut', perHour: price };
  }
}

const dollars = (cents: Cents | null | undefined): string => (cents === null || cents === undefined ? '' : (cents / 100).toFixed(2).replace(/\.00$/, ''));
const size = (value: number | null | undefined): string => (value === null || value === undefined ? '' : formatFraction(value, 32));

/** A card as the form's fields, to fill it in again. */
export function rateCardTyped(card: RateCard): Record<string, string> {
  const { basis, slabs, surcharges, extras, cullOpening, travel, minimum, metal, tax } = card;
  const price = basis.kind === 'hourly' ? basis.perHour : basis.perBf;
  const smallest = basis.kind === 'log-scale' ? basis.smallestLog : null;
  return {
    basis: basis.kind,
    tallyRule: basis.kind === 'lumber-tally' ? basis.rule : '',
    logRule: basis.kind === 'log-scale' ? basis.rule : '',
    clockFrom: basis.kind === 'hourly' ? basis.from : '',
    smallestDiameterIn: size(smallest?.diameterIn),
    smallestLengthFt: size(smallest?.lengthFt),
    priceWithout: dollars(price.withoutCents),
    priceWith: dollars(price.withCents),
    slabBy: slabs?.kind ?? 'none',
    slabPrice: dollars(slabs?.cents),
    quartersawn: dollars(surcharges.quartersawnPerBf),
    underFourQuarter: dollars(surcharges.underFourQuarterPerBf),
    overWideAboveIn: size(surcharges.overWide?.aboveIn),
    overWidePrice: dollars(surcharges.overWide?.perLogCents),
    overLongAboveFt: size(surcharges.overLong?.aboveFt),
    overLongPrice: dollars(surcharges.overLong?.perLogCents),
    dirty: dollars(surcharges.dirtyPerLog),
    movingMill: dollars(extras.movingMill),
    waiting: dollars(extras.waitingPerHour),
    wasteHauled: dollars(extras.wasteHauled),
    wasteBundled: dollars(extras.wasteBundled),
    sticker: dollars(extras.stickerEach),
    delivery: dollars(extras.deliveryPerLoad),
    cullBy: cullOpening?.kind ?? 'none',
    cullPrice: dollars(cullOpening?.cents),
    setUp: dollars(card.setUpPerLanding),
    freeMiles: String(travel.freeMiles),
    perMile: dollars(travel.perMileCents),
    travelAgain: travel.owedAgainAfterRain ? 'on' : '',
    minimum: dollars(minimum.cents),
    minimumCovers: minimum.covers,
    resharpened: dollars(metal.resharpenedCents),
    destroyed: dollars(metal.destroyedCents),
    metalCap: dollars(metal.capCents),
    taxPct: tax === null ? '' : String(tax.pct),
    taxLabel: tax?.label ?? '',
  };
}
