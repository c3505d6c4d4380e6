import { formatFeet, formatFraction, formatMetric } from '~/domain/measure.ts';

/** How lengths are shown and what a bare number means: inches and feet, or centimetres and metres. */
export type Units = 'us' | 'metric';

const whole = new Intl.NumberFormat('en-US', { maximumFractionDigits: 0 });
const tenths = new Intl.NumberFormat('en-US', { minimumFractionDigits: 1, maximumFractionDigits: 1 });
const hundredths = new Intl.NumberFormat('en-US', { minimumFractionDigits: 2, maximumFractionDigits: 2 });

export const wholeNumber = (value: number): string => whole.format(value);
export const oneDecimal = (value: number): string => tenths.format(value);
export const twoDecimals = (value: number): string => hundredths.format(value);

/** A diameter or a board's size. */
export const sayInches = (inches: number, units: Units): string => (units === 'us' ? `${formatFraction(inches)} in` : formatMetric(inches));

/** A log's length. */
export const sayFeet = (feet: number, units: Units): string => (units === 'us' ? formatFeet(feet) : formatMetric(feet * 12));

/** `1,160 lb`, to the nearest ten, or kilograms to the nearest five: green weights are not known closer. */
export const sayWeight = (lb: number, units: Units): string => (units === 'us' ? `${whole.format(Math.round(lb / 10) * 10)} lb` : `${whole.format(Math.round((lb * 0.45359237) / 5) * 5)} kg`);

/** "1 log", "3 logs". */
export const countOf = (count: number, one: string, many = `${one}s`): string => `${whole.format(count)} ${count === 1 ? one : many}`;
