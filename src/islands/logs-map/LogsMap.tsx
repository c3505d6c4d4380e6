import { useEffect, useRef, useState, type ReactElement } from 'react';
import { aroundHere } from './around-here.ts';
import type { MapHandle, MapPlace, MapTown } from './types.ts';

interface Props {
  /** Where distances are measured from; null when nobody said. */
  readonly from: { readonly lat: number; readonly lng: number } | null;
  readonly radiusMi: number | null;
  readonly places: readonly MapPlace[];
  readonly towns: readonly MapTown[];
  /** This page's address without a place, to which a point of the map is added. */
  readonly here: string;
  /** The tiles' filters as a query; null when only the list's own rows can be shown. */
  readonly tiles: string | null;
}

const rowOf = (number: number): HTMLElement | null => document.querySelector(`[data-listing="${number}"]`);

/** The open listings on a map, those of this page in step with the list beside it. The list has everything; the map is the extra. */
export default function LogsMap({ from, radiusMi, places, towns, here, tiles }: Props): ReactElement {
  const frame = useRef<HTMLDivElement>(null);
  const [state, setState] = useState<'loading' | 'shown' | 'failed'>('loading');
  const [middle, setMiddle] = useState<{ lat: number; lng: number } | null>(null);
  const [attempt, setAttempt] = useState(0);

  useEffect(() => {
    let handle: MapHandle | null = null;
    let gone = false;
    const light = (number: number | null): void => {
      for (const row of document.querySelectorAll<HTMLElement>('[data-listing]')) row.toggleAttribute('data-lit', Number(row.dataset['listing']) === number);
      handle?.light(number);
    };
    const numberAt = (event: Event): number | null => {
      const row = event.target instanceof Element ? event.target.closest<HTMLElement>('[data-listing]') : null;
      return row ? Number(row.dataset['listing']) : null;
    };
    const fromList = (event: Event): void => {
      const number = numberAt(event);
      if (number !== null) light(number);
    };
    const choose = (number: number): void => {
      light(number);
      const row = rowOf(number);
      row?.scrollIntoView({ block: 'nearest' });
      row?.querySelector('a')?.focus({ preventScroll: true });
    };
    void (async () => {
      try {
        const { drawMap } = await import('./draw-map.ts');
        if (gone || !frame.current) return;
        handle = await drawMap(frame.current, { from, radiusMi, places, towns, tiles, here }, { onLight: light, onChoose: choose, onMiddle: setMiddle });
        if (gone) handle.remove();
        else setState('shown');
      } catch (error) {
        console.warn('The map could not be drawn.', error);
        if (!gone) setState('failed');
      }
    })();
    document.addEventListener('mouseover', fromList);
    document.addEventListener('focusin', fromList);
    return () => {
      gone = true;
      document.removeEventListener('mouseover', fromList);
      document.removeEventListener('focusin', fromList);
      handle?.remove();
    };
  }, [attempt, from, radiusMi, places, towns, tiles, here]);

  const there = middle && aroundHere(here, middle);
  return (
    <div className="relative h-[26rem] w-full border-y border-rule bg-sapwood/30 lg:h-full lg:border-y-0 lg:border-l">
      <div className="logs-map h-full w-full" ref={frame} />
      {state === 'loading' && <p className="absolute left-4 top-4 text-ink-soft" role="status">Drawing the map</p>}
      {state === 'failed' && (
        <div className="absolute inset-x-4 top-4 bg-sheet p-4" role="status">
          <p className="font-bold">The map could not be drawn on this device.</p>
          <p className="mt-1">The list has everything that would be on it.</p>
          <button type="button" className="mt-2 min-h-target font-semibold text-crayon underline" onClick={() => { setState('loading'); setAttempt(attempt + 1); }}>Try again</button>
        </div>
      )}
      {there && <a className="absolute left-1/2 top-3 z-10 inline-flex min-h-target -translate-x-1/2 items-center border-2 border-ink bg-sheet px-4 font-bold no-underline" href={there}>Look around here</a>}
    </div>
  );
}
