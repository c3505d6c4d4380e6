import { useEffect, useRef, useState, type ReactElement } from 'react';
import { parseNumber } from '~/domain/measure.ts';
import type { PlaceAnswer } from '~/schemas/place.ts';
import { Button } from '../form/choices.tsx';
import type { PinHandle } from './draw-pin.ts';

interface Props {
  /** As typed. */
  readonly lat: string;
  readonly lng: string;
  readonly place: PlaceAnswer | null;
  readonly onMove: (lat: number, lng: number) => void;
}

/** The typed pin when it is plain numbers; null otherwise. */
function typedPin(lat: string, lng: string): { lat: number; lng: number } | null {
  const [north, west] = [parseNumber(lat), parseNumber(lng.trim().replace(/^[-−–]/, ''))];
  if (north === null || west === null || north > 90 || west > 180) return null;
  return { lat: north, lng: /^\s*[-−–]/.test(lng) ? -west : west };
}

/** A small map to move the pin on. The two fields say everything it says; it is loaded only when asked for. */
export function PinMap({ lat, lng, place, onMove }: Props): ReactElement {
  const [state, setState] = useState<'closed' | 'loading' | 'shown' | 'failed'>('closed');
  const frame = useRef<HTMLDivElement>(null);
  const handle = useRef<PinHandle | null>(null);
  const move = useRef(onMove);
  move.current = onMove;
  const pin = typedPin(lat, lng);
  const start = pin ?? place;
  const open = state === 'loading' || state === 'shown';

  useEffect(() => {
    if (!open || !start || !frame.current) return;
    let gone = false;
    const element = frame.current;
    void import('./draw-pin.ts')
      .then(({ drawPin }) => drawPin(element, { at: start, towns: place?.towns ?? [] }, (to) => move.current(to.lat, to.lng)))
      .then((drawn) => {
        if (gone) return drawn.remove();
        handle.current = drawn;
        setState('shown');
      })
      .catch((error: unknown) => {
        console.warn('The map could not be drawn.', error);
        if (!gone) setState('failed');
      });
    return () => {
      gone = true;
      handle.current?.remove();
      handle.current = null;
    };
    // Drawn once for each place; the pin then moves by itself.
  }, [open, place]);

  useEffect(() => {
    if (pin) handle.current?.moveTo(pin);
  }, [pin?.lat, pin?.lng]);

  if (!start) return <p className="text-sm text-ink-soft">With the ZIP code filled in you can also set the pin on a map.</p>;
  if (state === 'closed') return <Button kind="quiet" onClick={() => setState('loading')}>Set it on a map</Button>;
  return (
    <div className="mt-2">
      <div className="logs-map relative h-80 w-full max-w-form border-2 border-ink bg-sapwood/30" ref={frame} />
      <p className="mt-1 text-sm text-ink-soft" role="status">
        {state === 'loading' ? 'Drawing the map.' : state === 'failed' ? 'The map could not be drawn on this device. Type the numbers above instead.' : 'Drag the pin, or press on the spot. With the keyboard: go to the pin and use the arrow keys, with Shift for longer steps. The rings are a quarter, a half and one mile.'}
      </p>
    </div>
  );
}
