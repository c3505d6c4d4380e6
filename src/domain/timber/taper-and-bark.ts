import type { Species } from './species.ts';

/** Taper assumed when the large end was not measured: half an inch of diameter per 4 ft (the International rule's own). */
export const assumedTaperInPerFt = 1 / 8;

/** The measured large end, or the small end with the assumed taper over the full length. Inches, inside bark. */
export const largeEndOrTaper = (log: {
  readonly smallEndIn: number;
  readonly largeEndIn?: number | undefined;
  readonly lengthFt: number;
}): number => log.largeEndIn ?? log.smallEndIn + log.lengthFt * assumedTaperInPerFt;

/**
 * Diameter outside bark over diameter inside bark. It follows from the bark's volume as a share of the wood's
 * (Forest Service, FIA species table), taking the bark to be as thick a share of the diameter everywhere: an approximation,
 * thin bark near the top and thick bark at the butt are both met with.
 */
export const barkRatio = (species: Species): number => Math.sqrt(1 + species.barkPct / 100);

/** A diameter measured over the bark with the bark taken off, inches. */
export const insideBarkIn = (overBarkIn: number, species: Species): number => overBarkIn / barkRatio(species);

/** A diameter inside bark with the bark put on, inches. */
export const outsideBarkIn = (insideIn: number, species: Species): number => insideIn * barkRatio(species);

/** The largest diameter a mill must take, outside bark at the large end, inches: small end + taper + bark. */
export const largestEndOutsideBark = (
  log: { readonly smallEndIn: number; readonly largeEndIn?: number | undefined; readonly lengthFt: number },
  species: Species,
): number => outsideBarkIn(largeEndOrTaper(log), species);

/** The diameter of an oval end: the mean of two readings at right angles, or the only reading. Inches. */
export const meanDiameterIn = (readingIn: number, atRightAnglesIn?: number): number =>
  atRightAnglesIn === undefined ? readingIn : (readingIn + atRightAnglesIn) / 2;

/** What a log's length leaves over the whole foot, inches, and whether that is trim enough (4 in or more) for clean board ends. */
export function trimOf(lengthFt: number): { readonly trimIn: number; readonly enough: boolean; readonly nominalFt: number; readonly cleanFt: number } {
  const inches = Number((lengthFt * 12).toPrecision(12));
  const nominalFt = Math.floor(inches / 12);
  const trimIn = Number((inches - nominalFt * 12).toPrecision(6));
  const enough = trimIn >= 4;
  return { trimIn, enough, nominalFt, cleanFt: enough ? nominalFt : nominalFt - 1 };
}
