import { z } from 'zod';
import { logsPageSorts } from '~/domain/finding/sorts.ts';
import type { Problem } from '~/domain/result.ts';
import { checkWhereabouts, findingFields, numberText } from './listings.ts';

/** How far to look when nothing is said. */
export const usualRadiusMi = 50;

const flag = z.enum(['1'], { error: 'This is 1 or left out.' }).optional();

/** The address of the page of logs: what the endpoint takes, with what is a sawyer's own. */
const logsPage = z
  .object({
    ...findingFields,
    sort: z.enum(logsPageSorts, { error: 'Choose one of the orders.' }).optional(),
    closing: flag,
    fits: flag,
    /** Dollars for each hour on the road and at work, on the signed-in sawyer's own mill and rates. */
    minPerHour: numberText(0, 10_000, 'The least money an hour').optional(),
  })
  .superRefine(checkWhereabouts);
export type LogsAsked = z.output<typeof logsPage>;

export interface LogsPage {
  /** What was understood; fields with a problem are left out, so that a list can still be shown. */
  readonly asked: LogsAsked;
  readonly problems: readonly Problem[];
  /** Every field as it was typed, for the form. */
  readonly typed: Readonly<Record<string, string>>;
}

/**
 * Reads the page's address. Unlike the endpoint it never refuses: empty fields of the form count as left out, a ZIP goes before
 * a point, unknown names are ignored, and a field that cannot be used is named and dropped.
 */
export function readLogsPage(params: URLSearchParams): LogsPage {
  const typed = Object.fromEntries([...params].map(([name, value]) => [name, value.trim().slice(0, 300)]).filter(([, value]) => value !== ''));
  const given: Record<string, string> = { ...typed };
  if (given['zip'] !== undefined) {
    delete given['lat'];
    delete given['lng'];
  }
  if (given['zip'] === undefined && given['lat'] === undefined) {
    delete given['radiusMi'];
    if (given['sort'] === 'distance') delete given['sort'];
  }
  const problems: Problem[] = [];
  for (let round = 0; round < 4; round += 1) {
    const read = logsPage.safeParse(given);
    if (read.success) return { asked: read.data, problems, typed };
    for (const issue of read.error.issues) {
      const path = String(issue.path[0] ?? '');
      // An old cursor after a change of filters is nobody's mistake: the list begins again.
      if (path !== 'cursor' && !problems.some((problem) => problem.path === path)) problems.push({ path, message: issue.message });
      delete given[path];
      if (path === 'zip' || path === 'lat' || path === 'lng') for (const name of ['lat', 'lng', 'radiusMi', 'cursor']) delete given[name];
    }
    if (given['zip'] === undefined && given['lat'] === undefined && given['sort'] === 'distance') delete given['sort'];
  }
  return { asked: logsPage.parse({}), problems, typed };
}

/** An address of the page with some fields changed; empty ones are left out, and the list begins at its first page. */
export function logsAddress(base: string, typed: Readonly<Record<string, string>>, changes: Readonly<Record<string, string>> = {}): string {
  const fields = { ...typed, cursor: '', ...changes };
  const query = new URLSearchParams(Object.entries(fields).filter(([, value]) => value !== ''));
  return query.size > 0 ? `${base}?${query}` : base;
}
