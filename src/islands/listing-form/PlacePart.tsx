import { useEffect, useState, type ReactElement } from 'react';
import { fieldId } from '~/components/field-ids.ts';
import type { PlaceAnswer } from '~/schemas/place.ts';
import { Button } from '../form/choices.tsx';
import { Line, Lines, Part, useForm } from './parts.tsx';
import { PinMap } from './PinMap.tsx';

/** The place of a ZIP code as it is typed: null while it is none, `unknown` for a code without an area. */
function usePlace(zip: string): PlaceAnswer | 'unknown' | null {
  const [place, setPlace] = useState<PlaceAnswer | 'unknown' | null>(null);
  const code = /^\s*(\d{5})(-\d{4})?\s*$/.exec(zip)?.[1];
  useEffect(() => {
    setPlace(null);
    if (!code) return;
    const stop = new AbortController();
    void fetch(`/api/places?zip=${code}`, { signal: stop.signal })
      .then(async (answer) => {
        if (answer.ok) setPlace((await answer.json()) as PlaceAnswer);
        else if (answer.status === 404) setPlace('unknown');
      })
      // Without an answer the field works as before: the name is only a reassurance.
      .catch(() => undefined);
    return () => stop.abort();
  }, [code]);
  return place;
}

/** Writes the pin's two fields as if they had been typed. */
function setPin(lat: number, lng: number): void {
  for (const [name, value] of [['lat', lat], ['lng', lng]] as const) {
    const input = document.getElementById(fieldId(name));
    if (!(input instanceof HTMLInputElement)) continue;
    input.value = value.toFixed(5);
    input.dispatchEvent(new Event('input', { bubbles: true }));
  }
}

/** Where the logs lie: the ZIP for everybody, the pin for the one who comes. */
export function PlacePart(): ReactElement {
  const { typed } = useForm();
  const place = usePlace(typed.zip);
  return (
    <Part id="place" number={3} title="The place" lead="Everybody sees the town and a point about a mile wide. The exact place is seen by you, and by the sawyer you choose once the money is held.">
      <div>
        <Line name="zip" label="ZIP code where the logs lie" width="short" figure inputMode="numeric" maxLength={10} />
        <p className="mt-1 text-sm text-ink-soft" role="status">
          {place === 'unknown' ? 'We do not know this code. Codes for post-office boxes have no area: use the one of the place itself.' : place ? `Near ${place.town}, ${place.state}${place.county === '' ? '' : `, in ${place.county} County`}` : ''}
        </p>
      </div>
      <fieldset className="min-w-0">
        <legend className="font-semibold">Pin <span className="font-normal text-ink-soft">(if you like; it can follow later)</span></legend>
        <p className="mt-0.5 text-sm text-ink-soft">Latitude and longitude of the logs, as your phone’s map shows them when you press on the spot.</p>
        <div className="mt-2 grid max-w-form grid-cols-2 items-start gap-3">
          <Line name="lat" label="Latitude" figure inputMode="text" placeholder="43.5561" />
          <Line name="lng" label="Longitude" figure inputMode="text" placeholder="-90.8884" />
        </div>
        <HereButton />
        <PinMap lat={typed.lat} lng={typed.lng} place={place === 'unknown' ? null : place} onMove={setPin} />
      </fieldset>
      <Lines name="directions" label="How to find it" optional rows={2} hint="Address, gate, lane. As private as the pin." />
    </Part>
  );
}

/** Fills the pin from the device. */
function HereButton(): ReactElement {
  const [said, setSaid] = useState('');
  const find = (): void => {
    setSaid('Looking for your position.');
    navigator.geolocation.getCurrentPosition(
      ({ coords }) => {
        setPin(coords.latitude, coords.longitude);
        setSaid(`Pinned, to within about ${Math.max(1, Math.round(coords.accuracy * 3.281)).toLocaleString('en-US')} ft.`);
      },
      () => setSaid('Your device did not tell its position. Type the numbers instead.'),
      { enableHighAccuracy: true, timeout: 20_000 },
    );
  };
  return (
    <p className="mt-2 flex flex-wrap items-center gap-x-4">
      <Button kind="quiet" onClick={find}>I am at the logs: use where I am</Button>
      <span className="text-sm text-ink-soft" role="status">{said}</span>
    </p>
  );
}
