import { may } from '~/domain/permissions.ts';
import { forbidden, signedOut } from './errors.ts';
import { baseRoles, type Viewer } from './viewer.ts';

/**
 * Lets a moderator in whose second factor was given in this session; every query of the desk begins with it.
 * @throws Refusal `signedOut`, or `forbidden` with what is missing
 */
export function openDesk(viewer: Viewer | null): asserts viewer is Viewer {
  if (!viewer) throw signedOut();
  if (may('desk', 'open', baseRoles(viewer))) return;
  if (viewer.secondFactorDue && viewer.active) throw forbidden('The desk opens after the second step of signing in. Set it up under Account, Password and e-mail, then sign in with a code.');
  throw forbidden();
}

/** How many rows a page of a desk list shows. */
export const DESK_PAGE = 50;

/** Rows that were read one too many, as a page and whether more follow. */
export function pageOf<Row>(found: readonly Row[]): { readonly rows: readonly Row[]; readonly last: Row | null } {
  const shown = found.slice(0, DESK_PAGE);
  return { rows: shown, last: found.length > DESK_PAGE ? (shown.at(-1) ?? null) : null };
}

/** A typed search as a pattern that finds it anywhere, with the wildcards in it taken as they are. */
export const anywhere = (typed: string): string => `%${typed.replace(/[\\%_]/g, '\\$&')}%`;
