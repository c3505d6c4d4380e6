import type { AccountState } from '~/domain/states/account.ts';
import type { Tone } from '../status-words.ts';

/** How an account's state is coloured. */
export const accountTone: Readonly<Record<AccountState, Tone>> = { active: 'good', suspended: 'danger', closed: 'over' };

/** What an account works as, in words. */
export const workWords = (account: { readonly isLandowner: boolean; readonly isSawyer: boolean; readonly isModerator: boolean }): string =>
  [account.isLandowner && 'landowner', account.isSawyer && 'sawyer', account.isModerator && 'moderator'].filter(Boolean).join(', ');
