import { paths } from '~/domain/paths.ts';
import { linkTo } from './parties.ts';
import { seal, unseal } from './sealing.ts';

const purpose = 'stop-search';

/** The address that stops a saved search without signing in. Nothing is kept of it: it names the search, sealed. */
export const stopLink = (searchId: string): string => linkTo(paths.stopSearch(seal(purpose, purpose, searchId)));

/** The search that a link's secret names; null when it is not one of ours. */
export const searchOfLink = (token: string): string | null => unseal(purpose, purpose, token);
