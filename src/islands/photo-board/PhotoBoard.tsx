import { useMemo, useRef, useState, type ReactElement } from 'react';
import type { PhotoView } from '~/domain/photo.ts';
import { albumOf } from './album.ts';
import { DropArea } from './DropArea.tsx';
import { PhotoRow } from './PhotoRow.tsx';
import { usePhotos } from './use-photos.ts';

export interface PhotoBoardProps {
  /** Null for the board of the reader's own work. */
  readonly listingId: string | null;
  /** The listing's logs, for saying which one a photograph shows. */
  readonly logs: readonly { readonly id: string; readonly label: string }[];
  readonly photos: readonly PhotoView[];
}

/** Adds, arranges and describes the photographs of a listing, or of a sawyer's own work. Everything is kept at once; there is nothing to save. */
export function PhotoBoard({ listingId, logs, photos: given }: PhotoBoardProps): ReactElement {
  const album = useMemo(() => albumOf(listingId), [listingId]);
  const photos = usePhotos(album, given);
  const [said, say] = useState('');
  const [leftOut, setLeftOut] = useState(0);
  const [dragged, setDragged] = useState<string | null>(null);
  const list = useRef<HTMLOListElement>(null);
  const { items } = photos;
  const room = album.most - items.filter(({ stage }) => stage !== 'refused').length;

  const moveBy = (from: number, by: -1 | 1): void => {
    const to = from + by;
    if (to < 0 || to >= items.length) return;
    photos.move(from, to);
    photos.settleOrder();
    say(`${items[from]?.fileName ?? 'The photograph'} is now number ${to + 1} of ${items.length}.`);
  };
  const remove = async (key: string, index: number): Promise<void> => {
    const name = items[index]?.fileName ?? 'The photograph';
    await photos.remove(key);
    say(`${name} is removed.`);
    // The button that had the focus is gone with its row.
    requestAnimationFrame(() => list.current?.focus());
  };
  const dragOver = (key: string): void => {
    const from = items.findIndex((item) => item.key === dragged);
    const to = items.findIndex((item) => item.key === key);
    if (from >= 0 && to >= 0 && from !== to) photos.move(from, to);
  };

  return (
    <div className="max-w-[52rem]">
      <DropArea room={room} full={album.full} onFiles={(files, left) => {
        photos.add(files);
        setLeftOut(left);
        say(files.length === 1 ? '1 picture added.' : `${files.length} pictures added.`);
      }} />
      {leftOut > 0 && <p className="mt-3 border-l-4 border-amber pl-2 font-semibold" role="alert">{leftOut === 1 ? '1 picture was' : `${leftOut} pictures were`} left out: {album.full}.</p>}
      {photos.trouble && <p className="mt-3 border-l-4 border-heartwood pl-2 font-semibold text-heartwood" role="alert">{photos.trouble}</p>}
      <p className="sr-only" role="status">{said}</p>
      {items.length === 0
        ? <p className="mt-4 max-w-prose text-ink-soft">{album.empty}</p>
        : (
          <ol className="mt-4 border-t border-rule" ref={list} tabIndex={-1} aria-label="Photographs, in order">
            {items.map((item, index) => (
              <PhotoRow
                key={item.key}
                item={item}
                index={index}
                count={items.length}
                logs={logs}
                isDragged={dragged === item.key}
                onDragStart={() => setDragged(item.key)}
                onDragOver={() => dragOver(item.key)}
                onDragEnd={() => {
                  setDragged(null);
                  photos.settleOrder();
                }}
                onMove={(by) => moveBy(index, by)}
                onCancel={() => {
                  photos.cancel(item.key);
                  say(`${item.fileName} is cancelled.`);
                }}
                onRetry={() => photos.retry(item.key)}
                onRemove={() => remove(item.key, index)}
                onChange={(change) => photos.change(item.key, change)}
              />
            ))}
          </ol>
        )}
      {items.length > 1 && <p className="mt-3 text-sm text-ink-soft">{album.order} Drag a picture, or use its arrows, to change the order.</p>}
    </div>
  );
}
