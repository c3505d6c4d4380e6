import type { ReactElement } from 'react';
import { paths } from '~/domain/paths.ts';
import { Button } from '../form/choices.tsx';
import type { Draft, Kept } from './use-draft.ts';
import { timeOfDay } from '../clock.ts';

const plain = (kept: Kept): string => {
  switch (kept.kind) {
    case 'saving':
      return 'Saving';
    case 'saved':
      return `Saved ${timeOfDay(kept.at)}`;
    case 'in browser':
      return `Kept in this browser ${timeOfDay(kept.at)}`;
    default:
      return '';
  }
};

/** One quiet line that says where what was typed is kept, and what to do when it is not. */
export function SaveLine({ draft, back }: { readonly draft: Draft; readonly back: string }): ReactElement {
  const { kept } = draft;
  return (
    <div className="text-sm" role="status">
      {plain(kept) !== '' && <p className="text-ink-soft">{plain(kept)}</p>}
      {kept.kind === 'failed' && (
        <p className="border-l-4 border-amber pl-3">
          {kept.signIn ? 'You were signed out, so this is not saved to your account.' : `Not saved to your account. ${kept.message}`} What you typed is kept in this browser.
          {kept.signIn && <> <a href={`${paths.signIn}?next=${encodeURIComponent(back)}`}>Sign in again</a></>}
        </p>
      )}
      {kept.kind === 'elsewhere' && (
        <div className="border-l-4 border-amber pl-3">
          <p>This was saved somewhere else since you opened it here, on another device or in another window. Nothing has been overwritten.</p>
          <p className="flex flex-wrap gap-x-4"><a className="inline-flex min-h-target items-center" href={draft.number === null ? paths.myListings : back} target="_blank" rel="noreferrer">Look at the other one</a><Button kind="quiet" onClick={draft.keepMine}>Keep what is here</Button></p>
        </div>
      )}
    </div>
  );
}
