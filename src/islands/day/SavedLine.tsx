import type { ReactElement } from 'react';
import { join } from '~/components/classes.ts';
import type { TallyQueue } from '~/islands/tally-book/use-tally-queue.ts';
import { signInAgain } from './send.ts';
import { timeOfDay } from '../clock.ts';

/** In one line: what is saved on this phone, and what the server has. */
export function savedWords({ waiting, sentAt, sending }: Pick<TallyQueue, 'waiting' | 'sentAt' | 'sending'>): string {
  if (waiting === 0) return sentAt ? `All sent at ${timeOfDay(sentAt)}` : 'Nothing waits to be sent';
  const saved = `${waiting} saved here`;
  if (sending === 'no-signal') return `No signal · ${saved}`;
  if (sending === 'signed-out') return `Signed out · ${saved}`;
  return `Sending · ${saved}`;
}

/** The badge of the tally book's head. */
export function SavedBadge({ queue }: { readonly queue: TallyQueue }): ReactElement {
  return (
    <p className={join('rounded px-3 py-1 text-sm font-semibold', queue.waiting > 0 ? 'bg-[#7A4E00] text-[#fff]' : 'border border-paper')} role="status" data-testid="saved">
      {savedWords(queue)}
    </p>
  );
}

/** What needs a person: storage that is full, a sign-in that has run out, entries that the server would not take. */
export function SendingTrouble({ queue }: { readonly queue: TallyQueue }): ReactElement | null {
  const { refused } = queue;
  if (!queue.trouble && queue.sending !== 'signed-out' && refused.length === 0) return null;
  return (
    <div className="border-l-4 border-amber bg-sheet px-4 py-2" role="alert">
      {queue.trouble && <p className="font-semibold">{queue.trouble}</p>}
      {queue.sending === 'signed-out' && queue.waiting > 0 && (
        <p>You are signed out. Go on: everything is kept on this phone. <a className="font-bold" href={signInAgain}>Sign in again</a> and it is sent.</p>
      )}
      {refused.length > 0 && (
        <>
          <p className="font-semibold">{refused.length === 1 ? 'One entry was' : `${refused.length} entries were`} not taken. {refused.length === 1 ? 'It is' : 'They are'} still kept here.</p>
          <ul>
            {refused.slice(0, 20).map((item) => (
              <li key={item.seq} className="flex items-center justify-between gap-3 border-b border-rule py-1">
                <span>{describe(item.entry)}: {item.because}</span>
                <button type="button" className="min-h-glove px-2 font-semibold text-crayon underline" onClick={() => queue.drop(item)}>Drop it</button>
              </li>
            ))}
          </ul>
          <button type="button" className="min-h-glove font-bold text-crayon underline" onClick={queue.tryAgain}>Send {refused.length === 1 ? 'it' : 'them'} again</button>
        </>
      )}
    </div>
  );
}

function describe(entry: TallyQueue['refused'][number]['entry']): string {
  switch (entry.kind) {
    case 'board': return `${entry.count} of ${entry.thicknessIn} × ${entry.widthIn} in × ${entry.lengthFt} ft`;
    case 'hit': return `Metal hit, blade ${entry.outcome}`;
    case 'cull': return `Cull log: ${entry.reason}`;
    case 'clock': return 'Hours';
    case 'correctClock': return 'Hours put right';
    case 'remove': return 'A line taken back';
    case 'extras': return 'Extras';
    case 'start': return 'The start of sawing';
    case 'measure': return 'A log measured again';
    case 'addLog': return 'A log added';
    case 'allow': return `What ${entry.name} allowed`;
    case 'part': return `${entry.name}’s signature for part of the work`;
    case 'offer': return 'The tally offered for signing';
    case 'sign': return `${entry.name}’s signature`;
  }
}
