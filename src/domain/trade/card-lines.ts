import { formatCents } from '~/domain/money.ts';
import { basisPrice, describeBasis, describeMinimum, type RateCard } from './rate-card.ts';

/** A rate card as rows of name and price, for the agreement, the bid and a sawyer's page. Only what the card charges. */
export function cardLines(card: RateCard): readonly { readonly label: string; readonly value: string; readonly note?: string }[] {
  const price = basisPrice(card.basis);
  const unit = card.basis.kind === 'hourly' ? '/ hour' : '/ bf';
  const { surcharges, extras, travel, metal, tax, slabs, cullOpening } = card;
  const rows: ({ label: string; value: string; note?: string } | false)[] = [
    { label: 'Sawing, landowner provides the off-bearer', value: `${formatCents(price.withoutCents)} ${unit}`, note: describeBasis(card) },
    { label: 'Sawing, sawyer brings an off-bearer', value: `${formatCents(price.withCents)} ${unit}` },
    slabs !== null && { label: 'Slabs', value: `${formatCents(slabs.cents)} / ${slabs.kind === 'square-foot' ? 'sq ft' : 'bf'}`, ...(slabs.kind === 'square-foot' ? { note: 'mean of both faces at mid-length' } : {}) },
    { label: 'Set-up, per landing', value: formatCents(card.setUpPerLanding) },
    { label: `Travel beyond ${travel.freeMiles} miles, both ways`, value: `${formatCents(travel.perMileCents)} / mile`, note: travel.owedAgainAfterRain ? 'owed again after rain' : 'not owed again after rain' },
    { label: 'Minimum', value: card.minimum.cents === 0 ? 'none' : formatCents(card.minimum.cents), ...(card.minimum.cents === 0 ? {} : { note: describeMinimum(card) }) },
    surcharges.quartersawnPerBf > 0 && { label: 'Quartersawn', value: `${formatCents(surcharges.quartersawnPerBf)} / bf more` },
    surcharges.underFourQuarterPerBf > 0 && { label: 'Under 4/4', value: `${formatCents(surcharges.underFourQuarterPerBf)} / bf more` },
    surcharges.overWide !== null && { label: `Logs over ${surcharges.overWide.aboveIn} in`, value: `${formatCents(surcharges.overWide.perLogCents)} / log`, note: 'largest end, over bark' },
    surcharges.overLong !== null && { label: `Logs over ${surcharges.overLong.aboveFt} ft`, value: `${formatCents(surcharges.overLong.perLogCents)} / log` },
    surcharges.dirtyPerLog > 0 && { label: 'Dirty logs', value: `${formatCents(surcharges.dirtyPerLog)} / log` },
    { label: 'Waiting', value: card.basis.kind === 'hourly' ? 'on the clock' : `${formatCents(extras.waitingPerHour)} / hour` },
    cullOpening !== null && { label: 'Opening a rotten log', value: `${formatCents(cullOpening.cents)} / ${cullOpening.kind}` },
    extras.movingMill !== null && { label: 'Moving the mill', value: formatCents(extras.movingMill) },
    extras.wasteHauled !== null && { label: 'Slabs and sawdust hauled away', value: formatCents(extras.wasteHauled) },
    extras.wasteBundled !== null && { label: 'Slabs bundled', value: formatCents(extras.wasteBundled) },
    extras.stickerEach !== null && { label: 'Stickers', value: `${formatCents(extras.stickerEach)} each` },
    extras.deliveryPerLoad !== null && { label: 'Delivery', value: `${formatCents(extras.deliveryPerLoad)} / load` },
    { label: 'Metal hit, blade re-sharpened', value: formatCents(metal.resharpenedCents) },
    { label: 'Metal hit, blade destroyed', value: formatCents(metal.destroyedCents), note: `up to ${formatCents(metal.capCents)} in all` },
    tax !== null && { label: tax.label, value: `${tax.pct} %`, note: 'as the sawyer states it; ask an adviser' },
  ];
  return rows.filter((row) => row !== false);
}
