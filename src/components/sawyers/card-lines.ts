import { formatCents, type Cents } from '~/domain/money.ts';
import { basisPrice, describeBasis, describeMinimum, describeRate, type RateCard } from '~/domain/trade/rate-card.ts';

export interface CardLine {
  readonly label: string;
  readonly value: string;
  readonly note?: string;
}

const offered = (label: string, cents: Cents | null, unit = '', note?: string): CardLine[] => (cents === null ? [] : [{ label, value: `${formatCents(cents)}${unit}`, ...(note ? { note } : {}) }]);
const charged = (label: string, cents: Cents, unit = ''): CardLine[] => (cents === 0 ? [] : offered(label, cents, unit));

/** A rate card line by line, as landowners read it: what is charged and by what, then what may come on top. */
export function cardLines(card: RateCard): readonly CardLine[] {
  const { surcharges, extras, travel, metal } = card;
  const price = basisPrice(card.basis);
  const travelNote = `both ways, beyond ${travel.freeMiles} free miles${travel.owedAgainAfterRain ? '; owed again after a day lost to rain' : ''}`;
  return [
    { label: 'Sawing, sawyer brings an off-bearer', value: describeRate(card, 'sawyer-brings'), note: describeBasis(card) },
    ...(price.withoutCents === price.withCents ? [] : [{ label: 'Sawing, you provide an off-bearer', value: describeRate(card, 'landowner-provides') }]),
    ...(card.slabs ? [{ label: 'Slabs', value: `${formatCents(card.slabs.cents)} / ${card.slabs.kind === 'square-foot' ? 'sq ft' : 'bf'}` }] : []),
    { label: 'Set-up, per landing', value: formatCents(card.setUpPerLanding) },
    { label: 'Travel', value: `${formatCents(travel.perMileCents)} / mile`, note: travelNote },
    ...(card.minimum.cents > 0 ? [{ label: 'Minimum', value: formatCents(card.minimum.cents), note: describeMinimum(card).replace(/^\S+ minimum /, '') }] : []),
    { label: 'Metal hit, blade re-sharpened', value: formatCents(metal.resharpenedCents) },
    { label: 'Metal hit, blade destroyed', value: formatCents(metal.destroyedCents) },
    ...charged('Quartersawn, more', surcharges.quartersawnPerBf, ' / bf'),
    ...charged('Under 4/4, more', surcharges.underFourQuarterPerBf, ' / bf'),
    ...(surcharges.overWide ? charged(`Log over ${surcharges.overWide.aboveIn} in, more`, surcharges.overWide.perLogCents, ' / log') : []),
    ...(surcharges.overLong ? charged(`Log over ${surcharges.overLong.aboveFt} ft, more`, surcharges.overLong.perLogCents, ' / log') : []),
    ...charged('Dirty log, more', surcharges.dirtyPerLog, ' / log'),
    ...charged('Waiting', extras.waitingPerHour, ' / hour'),
    ...offered('Moving the mill', extras.movingMill),
    ...offered('Waste hauled away', extras.wasteHauled),
    ...offered('Waste bundled', extras.wasteBundled),
    ...offered('Stickers', extras.stickerEach, ' each'),
    ...offered('Delivery', extras.deliveryPerLoad, ' / load'),
    ...(card.tax ? [{ label: card.tax.label || 'Tax', value: `${card.tax.pct} %`, note: 'as the sawyer states it' }] : []),
  ];
}
