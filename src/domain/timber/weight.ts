import { huber } from './cubic.ts';
import { woodDensity, type Species } from './species.ts';
import { largeEndOrTaper } from './taper-and-bark.ts';

interface MeasuredLog {
  readonly smallEndIn: number;
  readonly largeEndIn?: number | undefined;
  readonly lengthFt: number;
}

/** Weight of a foot of log, lb: green density × the area of its mean diameter. */
export const weightPerFootLb = (densityLbPerFt3: number, meanDiameterIn: number): number => densityLbPerFt3 * huber(meanDiameterIn, 1);

/** Green weight of the wood alone, lb: the species' green density, the mean of the two end diameters, the full length. */
export const greenWoodWeightLb = (log: MeasuredLog, species: Species): number =>
  weightPerFootLb(species.greenDensityLbPerFt3, (log.smallEndIn + largeEndOrTaper(log)) / 2) * log.lengthFt;

/**
 * Green weight with the bark on, lb: what a loader, a trailer and a bunk must carry. The bark is counted at the green
 * density of the wood (common practice, no source).
 */
export const greenWeightWithBark = (log: MeasuredLog, species: Species): number => greenWoodWeightLb(log, species) * (1 + species.barkPct / 100);

export interface WeightRange {
  readonly lowLb: number;
  readonly highLb: number;
  readonly why: string;
}

const toTens = (lb: number): number => Math.round(lb / 10) * 10;

/**
 * A range round the green weight with bark, to the nearest 10 lb. Where the moisture of heartwood and sapwood is known, from
 * a log all of the drier to one all of the wetter, but at least a tenth either way; else a tenth either way (common practice, no source).
 */
export function greenWeightRange(log: MeasuredLog, species: Species): WeightRange {
  const mean = greenWeightWithBark(log, species);
  const { heartMoisturePct: heart, sapMoisturePct: sap } = species;
  if (heart === null || sap === null) {
    return { lowLb: toTens(mean * 0.9), highLb: toTens(mean * 1.1), why: 'a tenth either way (common practice, no source)' };
  }
  const at = (moisturePct: number): number => (mean * woodDensity(species.specificGravityGreen, moisturePct)) / species.greenDensityLbPerFt3;
  return {
    lowLb: toTens(Math.min(at(Math.min(heart, sap)), mean * 0.9)),
    highLb: toTens(Math.max(at(Math.max(heart, sap)), mean * 1.1)),
    why: `green heartwood at ${heart} % moisture, sapwood at ${sap} %, and at least a tenth either way`,
  };
}

/** What part of a rating may be used, so that a load carries a margin (common practice, no source; the equipment's manual comes first). */
export const loadMargin = 0.8;

/** Whether a loader may lift a log. `ratingAtLoadCentreLb` is its rating at the load's centre, not at the pins. */
export const canLift = (weightLb: number, ratingAtLoadCentreLb: number): boolean => weightLb <= ratingAtLoadCentreLb * loadMargin;

export interface Trips {
  /** Indexes of the logs of each trip, heaviest log first. */
  readonly loads: readonly { readonly logs: readonly number[]; readonly weightLb: number }[];
  /** Logs too heavy for the trailer by themselves. */
  readonly tooHeavy: readonly number[];
}

/**
 * Shares logs over trips of a trailer whose rated load is `ratedLoadLb` (its weight rating less its own weight), using
 * only the part within the margin. Heaviest first into the first trip with room: a plan that works, not always the fewest trips.
 */
export function planTrips(weightsLb: readonly number[], ratedLoadLb: number): Trips {
  const capacity = ratedLoadLb * loadMargin;
  const loads: { logs: number[]; weightLb: number }[] = [];
  const tooHeavy: number[] = [];
  const heaviestFirst = weightsLb.map((weightLb, index) => ({ weightLb, index })).sort((a, b) => b.weightLb - a.weightLb || a.index - b.index);
  for (const { weightLb, index } of heaviestFirst) {
    if (weightLb > capacity) {
      tooHeavy.push(index);
      continue;
    }
    const roomy = loads.find((load) => load.weightLb + weightLb <= capacity);
    if (roomy) {
      roomy.logs.push(index);
      roomy.weightLb += weightLb;
    } else loads.push({ logs: [index], weightLb });
  }
  return { loads, tooHeavy };
}
