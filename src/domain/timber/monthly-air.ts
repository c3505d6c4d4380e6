import { equilibriumMoisturePct } from './drying.ts';

/** The mean air of a month, as somebody typed it. `month`: 1 for January. */
export interface MonthAir {
  readonly month: number;
  readonly temperatureF: number;
  readonly humidityPct: number;
}

export const monthNames = ['January', 'February', 'March', 'April', 'May', 'June', 'July', 'August', 'September', 'October', 'November', 'December'] as const;

/** A month with the moisture content that boards end near in its air, per cent. */
export interface DryingMonth extends MonthAir {
  readonly name: string;
  readonly equilibriumPct: number;
}

/** The months in the order of the year, each with where boards end in its air (Wood Handbook, equation 4-5). */
export const dryingMonths = (air: readonly MonthAir[]): DryingMonth[] =>
  [...air].sort((a, b) => a.month - b.month).map((one) => ({ ...one, name: monthNames[one.month - 1] ?? '', equilibriumPct: equilibriumMoisturePct(one.temperatureF, one.humidityPct) }));

/** The month whose air dries furthest; null without any. */
export const driestMonth = (months: readonly DryingMonth[]): DryingMonth | null => months.reduce<DryingMonth | null>((best, one) => (best === null || one.equilibriumPct < best.equilibriumPct ? one : best), null);
