import type { ReactElement } from 'react';
import type { Item } from './item.ts';

/** How far a photograph is, in words, with a bar while it is being sent. */
export function PhotoStage({ item }: { readonly item: Item }): ReactElement | null {
  switch (item.stage) {
    case 'waiting':
      return <p className="mt-1 text-ink-soft">Waits for its turn</p>;
    case 'sending':
      return (
        <p className="mt-1 flex items-center gap-3">
          <progress className="h-3 w-full max-w-[16rem] accent-crayon" max={1} value={item.sent} aria-label={`Sending ${item.fileName}`} />
          <span className="figure whitespace-nowrap">{Math.floor(item.sent * 100)} %</span>
        </p>
      );
    case 'checking':
      return <p className="mt-1 text-ink-soft">Arrived. It is being checked.</p>;
    case 'refused':
    case 'failed':
      return <p className="mt-1 border-l-4 border-heartwood pl-2 font-semibold text-heartwood" role="alert">{item.problem}</p>;
    case 'ready':
      return null;
  }
}
