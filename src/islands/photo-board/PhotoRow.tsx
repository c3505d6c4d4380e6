import { useState, type ReactElement } from 'react';
import { buttonKinds, join } from '~/components/classes.ts';
import type { Item } from './item.ts';
import { PhotoFields } from './PhotoFields.tsx';
import { PhotoStage } from './PhotoStage.tsx';
import { Thumbnail } from './Thumbnail.tsx';

export interface PhotoRowProps {
  readonly item: Item;
  readonly index: number;
  readonly count: number;
  readonly logs: readonly { readonly id: string; readonly label: string }[];
  readonly isDragged: boolean;
  readonly onDragStart: () => void;
  readonly onDragOver: () => void;
  readonly onDragEnd: () => void;
  readonly onMove: (by: -1 | 1) => void;
  readonly onCancel: () => void;
  readonly onRetry: () => void;
  readonly onRemove: () => Promise<void>;
  readonly onChange: (change: { readonly caption?: string; readonly logId?: string | null }) => Promise<void>;
}

const arrow = 'inline-flex min-h-target min-w-target items-center justify-center rounded border-2 border-ink bg-sheet text-lg font-bold leading-none hover:bg-sapwood aria-disabled:cursor-default aria-disabled:border-rule aria-disabled:text-ink-soft aria-disabled:hover:bg-sheet';

/** One photograph: its picture, how far it is, its place in the order, its caption and log. */
export function PhotoRow({ item, index, count, logs, isDragged, onDragStart, onDragOver, onDragEnd, onMove, onCancel, onRetry, onRemove, onChange }: PhotoRowProps): ReactElement {
  const [asking, setAsking] = useState(false);
  const [trouble, setTrouble] = useState<string | null>(null);
  const name = item.fileName || 'photograph';
  const remove = (): void => {
    onRemove().catch((error: unknown) => {
      setAsking(false);
      setTrouble(error instanceof Error ? error.message : 'That did not work. Try again.');
    });
  };
  return (
    <li
      className={join('grid grid-cols-[6rem_minmax(0,1fr)] gap-x-4 gap-y-2 border-b border-rule py-4 sm:grid-cols-[9rem_minmax(0,1fr)_auto]', isDragged && 'opacity-60')}
      onDragOver={(event) => {
        event.preventDefault();
        onDragOver();
      }}
      onDrop={(event) => event.preventDefault()}
    >
      <div
        className="cursor-grab"
        draggable
        onDragStart={(event) => {
          event.dataTransfer.effectAllowed = 'move';
          // Firefox drags nothing that carries no data.
          event.dataTransfer.setData('text/plain', name);
          onDragStart();
        }}
        onDragEnd={onDragEnd}
      >
        <Thumbnail item={item} />
      </div>
      <div className="min-w-0">
        <p className="flex flex-wrap items-baseline gap-x-3"><span className="figure text-ink-soft">{index + 1}</span><span className="min-w-0 break-words font-semibold">{name}</span></p>
        <PhotoStage item={item} />
        {trouble && <p className="mt-1 border-l-4 border-heartwood pl-2 font-semibold text-heartwood" role="alert">{trouble}</p>}
        {item.photo && (item.stage === 'ready' || item.stage === 'checking' || item.stage === 'sending') && <PhotoFields photo={item.photo} logs={logs} name={name} onChange={onChange} />}
      </div>
      <div className="col-span-2 flex flex-wrap items-start gap-2 sm:col-span-1 sm:max-w-[13rem] sm:justify-end">
        <button type="button" className={arrow} aria-disabled={index === 0} aria-label={`Move ${name} earlier`} onClick={() => onMove(-1)}><span aria-hidden="true">↑</span></button>
        <button type="button" className={arrow} aria-disabled={index === count - 1} aria-label={`Move ${name} later`} onClick={() => onMove(1)}><span aria-hidden="true">↓</span></button>
        {item.stage === 'failed' && item.file && <button type="button" className={buttonKinds.outlined} aria-label={`Try ${name} again`} onClick={onRetry}>Try again</button>}
        {(item.stage === 'waiting' || item.stage === 'sending')
          ? <button type="button" className={buttonKinds.quiet} aria-label={`Cancel ${name}`} onClick={onCancel}>Cancel</button>
          : asking
            ? (
              <span className="flex flex-wrap gap-2" role="group" aria-label={`Remove ${name}?`}>
                <button type="button" className={buttonKinds.danger} autoFocus onClick={remove}>Remove it</button>
                <button type="button" className={buttonKinds.quiet} onClick={() => setAsking(false)}>Keep it</button>
              </span>
            )
            : <button type="button" className={buttonKinds.quiet} aria-label={`Remove ${name}`} onClick={() => (item.photo && item.stage === 'ready' ? setAsking(true) : remove())}>Remove</button>}
      </div>
    </li>
  );
}
