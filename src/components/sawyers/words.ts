import { formatFeet, formatFraction, formatInches } from '~/domain/measure.ts';
import { MILL_KIND_NAMES } from '~/domain/trade/mill-fit.ts';
import type { PublicMill, PublicSawyer } from '~/server/queries/sawyers-near.ts';

const sentence = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

/** `Band mill, kerf 3/32 in, logs to 30 in × 17 ft` */
export const millWords = (mill: PublicMill): string => {
  const kind = MILL_KIND_NAMES[mill.kind];
  return `${sentence(kind)}${/mill$/.test(kind) ? '' : ' mill'}, kerf ${formatFraction(mill.kerfIn, 32)} in, logs to ${formatInches(mill.largestLogIn)} × ${formatFeet(mill.longestFt)}`;
};

/** `12 settled jobs · 4.8 of 5 from 9 reviews` */
export function standingWords({ settledJobs, reviewCount, meanStars }: PublicSawyer): string {
  const jobs = settledJobs === 0 ? 'No settled jobs yet' : `${settledJobs} settled ${settledJobs === 1 ? 'job' : 'jobs'}`;
  const reviews = meanStars === null ? 'no reviews yet' : `${meanStars.toFixed(1)} of 5 from ${reviewCount} ${reviewCount === 1 ? 'review' : 'reviews'}`;
  return `${jobs} · ${reviews}`;
}
