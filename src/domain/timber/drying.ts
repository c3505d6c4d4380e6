import { good, refused, type Result } from '../result.ts';
import { airDryingRows } from './data/air-drying-table.ts';
import { findSpecies, woodDensity, type Shrinkage, type Species } from './species.ts';

/** Wood stops shrinking above this moisture content, per cent (fibre saturation, Wood Handbook chapter 4). */
export const fibreSaturationPct = 30;

/**
 * Equilibrium moisture content of wood, per cent, from air temperature (°F) and relative humidity (%).
 * Source: USDA FPL Wood Handbook, equation 4-5 (coefficients for °C).
 */
export function equilibriumMoisturePct(temperatureF: number, relativeHumidityPct: number): number {
  const t = (temperatureF - 32) / 1.8;
  const h = relativeHumidityPct / 100;
  const w = 349 + 1.29 * t + 0.0135 * t ** 2;
  const k = 0.805 + 0.000736 * t - 0.00000273 * t ** 2;
  const k1 = 6.27 - 0.00938 * t - 0.000303 * t ** 2;
  const k2 = 1.91 + 0.0407 * t - 0.000293 * t ** 2;
  const kh = k * h;
  const sorbed = (k1 * kh + 2 * k1 * k2 * kh ** 2) / (1 + k1 * kh + k1 * k2 * kh ** 2);
  return (1800 / w) * (kh / (1 - kh) + sorbed);
}

/** Share of the full shrinkage reached at a moisture content: 1 − x / 30, nothing above 30 %. */
const shareOfShrinkage = (moisturePct: number): number => Math.max(0, 1 - moisturePct / fibreSaturationPct);

/** A green size after drying to a moisture content, inches; `shrinkagePct` is green to oven-dry. */
export const sizeAtMoisture = (greenIn: number, shrinkagePct: number, moisturePct: number): number =>
  greenIn * (1 - (shrinkagePct / 100) * shareOfShrinkage(moisturePct));

/** Weight of wood at a moisture content, lb per cubic foot at that moisture: 62.4 × Gx × (1 + x/100), Gx = Gb / (1 − Sv/100 × (1 − x/30)). */
export const densityAtMoisture = (specificGravityGreen: number, volumetricPct: number, moisturePct: number): number =>
  woodDensity(specificGravityGreen / (1 - (volumetricPct / 100) * shareOfShrinkage(moisturePct)), moisturePct);

/** How a board's face lies to the rings: flat-sawn shrinks tangentially across its width, quartersawn radially. */
export type Grain = 'flat' | 'quarter';

/** Shrinkage across the width and through the thickness for a grain, per cent. */
export const shrinkageByGrain = (shrinkage: { readonly radial: number; readonly tangential: number }, grain: Grain): { readonly widthPct: number; readonly thicknessPct: number } =>
  grain === 'flat' ? { widthPct: shrinkage.tangential, thicknessPct: shrinkage.radial } : { widthPct: shrinkage.radial, thicknessPct: shrinkage.tangential };

export interface AirDryingDays {
  readonly from: number;
  readonly to: number;
}

/** Green lumber this thick or thicker is no longer 4/4, inches: the table is not stretched to it. */
export const thickerThanTableIn = 1.25;

/**
 * Days to air-dry 4/4 lumber to 20 % (air-dried, never called dry), as wide as the table's rows for the species.
 * Null when the table has no row for the species or the lumber is thicker than 4/4.
 */
export function airDryingDays(species: Species, thicknessIn: number): AirDryingDays | null {
  const rows = airDryingRows[species.code];
  if (!rows || thicknessIn >= thickerThanTableIn) return null;
  return { from: Math.min(...rows.map((row) => row.fromDays)), to: Math.max(...rows.map((row) => row.toDays)) };
}

export interface DryingInput {
  /** A species code. */
  readonly species: string;
  readonly temperatureF: number;
  readonly relativeHumidityPct: number;
  /** Green sizes, inches. */
  readonly thicknessIn: number;
  readonly widthIn: number;
  readonly grain: Grain;
}

export interface Drying {
  readonly equilibriumMoisturePct: number;
  readonly widthAtEquilibriumIn: number;
  readonly thicknessAtEquilibriumIn: number;
  readonly airDryingDays: AirDryingDays | null;
  readonly weightLbPerFt3: number;
}

const known = ({ radial, tangential, volumetric }: Shrinkage): { radial: number; tangential: number; volumetric: number } | string[] => {
  if (radial !== null && tangential !== null && volumetric !== null) return { radial, tangential, volumetric };
  return [radial === null ? 'radial' : '', tangential === null ? 'tangential' : '', volumetric === null ? 'volumetric' : ''].filter((name) => name !== '');
};

/** What a board comes to in the air it dries in: the answer of `POST /api/drying`. Refuses a species without published shrinkage, naming what is missing. */
export function dryBoard(input: DryingInput): Result<Drying> {
  const species = findSpecies(input.species);
  if (!species) return refused('species', `There is no species "${input.species}". Use a code from the list of species.`);
  const shrinkage = known(species.shrinkagePct);
  if (Array.isArray(shrinkage)) {
    return refused('species', `No ${shrinkage.join(', ')} shrinkage is published for ${species.name}, so its dry size cannot be worked out.`);
  }
  const moisture = equilibriumMoisturePct(input.temperatureF, input.relativeHumidityPct);
  const { widthPct, thicknessPct } = shrinkageByGrain(shrinkage, input.grain);
  return good({
    equilibriumMoisturePct: moisture,
    widthAtEquilibriumIn: sizeAtMoisture(input.widthIn, widthPct, moisture),
    thicknessAtEquilibriumIn: sizeAtMoisture(input.thicknessIn, thicknessPct, moisture),
    airDryingDays: airDryingDays(species, input.thicknessIn),
    weightLbPerFt3: densityAtMoisture(species.specificGravityGreen, shrinkage.volumetric, moisture),
  });
}
