import { formatDollars, roundCents } from '~/domain/money.ts';
import { hourWords, type JobForMill } from '~/domain/trade/job-worth.ts';

/** How figures of a listing are said in a row. */
export const bidWords = (count: number): string => (count === 0 ? 'No bids yet' : count === 1 ? '1 bid' : `${count} bids`);
export const logWords = (count: number): string => (count === 1 ? '1 log' : `${count.toLocaleString('en-US')} logs`);
export const milesWords = (miles: number): string => (miles < 10 ? miles.toFixed(1) : String(Math.round(miles)));

/** `about 62 mi there and back`. */
export const roundTripWords = (roadMilesOneWay: number): string => `${roadMilesOneWay * 2} mi there and back`;

/** A job in a row: the verdict, and what it brings or the first reason against it. `withMill` names the mill. */
export function jobWords({ fit, mill, worth }: JobForMill, withMill: boolean): { readonly fits: boolean; readonly line: string; readonly first: string; readonly perHour: string; readonly more: number } {
  if (!fit.fits) return { fits: false, line: withMill ? `Does not fit ${mill.name}.` : 'Does not fit.', first: fit.reasons[0] ?? '', perHour: '', more: Math.max(0, fit.reasons.length - 1) };
  const brings = worth && `estimate ${formatDollars(roundDollars(worth.estimateCents))}, ${hourWords(worth.workHours)} at work, ${roundTripWords(worth.roadMiles)}`;
  return { fits: true, line: withMill ? `Fits ${mill.name}` : 'Fits your mill', first: brings ?? '', perHour: worth ? `${formatDollars(roundDollars(worth.perHourCents))} an hour` : '', more: 0 };
}

/** Cents to the whole dollar, for figures that are estimates of estimates. */
const roundDollars = (cents: number): number => roundCents(cents / 100) * 100;
