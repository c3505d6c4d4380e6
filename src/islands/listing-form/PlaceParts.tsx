import { useState, type ReactElement } from 'react';
import { landingTicks, machines, overheadLines, reDeckers, sawdustEnds, slabEnds, slopes, trucks, water } from '~/domain/listing/answers.ts';
import { lineCautions, slopeCautions } from '~/domain/listing/cautions.ts';
import { fieldId } from '~/components/field-ids.ts';
import { Button } from '../form/choices.tsx';
import { Care, Choose, Line, Lines, Part, Tick, useForm } from './parts.tsx';

/** Where the logs lie: the ZIP for everybody, the pin for the one who comes. */
export function PlacePart(): ReactElement {
  return (
    <Part id="place" number={3} title="The place" lead="Everybody sees the town and a point about a mile wide. The exact place is seen by you, and by the sawyer you choose once the money is held.">
      <Line name="zip" label="ZIP code where the logs lie" width="short" figure inputMode="numeric" maxLength={10} />
      <fieldset className="min-w-0">
        <legend className="font-semibold">Pin <span className="font-normal text-ink-soft">(if you like; it can follow later)</span></legend>
        <p className="mt-0.5 text-sm text-ink-soft">Latitude and longitude of the logs, as your phone’s map shows them when you press on the spot.</p>
        <div className="mt-2 grid max-w-form grid-cols-2 items-start gap-3">
          <Line name="lat" label="Latitude" figure inputMode="text" placeholder="43.5561" />
          <Line name="lng" label="Longitude" figure inputMode="text" placeholder="-90.8884" />
        </div>
        <HereButton />
      </fieldset>
      <Lines name="directions" label="How to find it" optional rows={2} hint="Address, gate, lane. As private as the pin." />
    </Part>
  );
}

/** Fills the pin from the device. Only offered where the browser can. */
function HereButton(): ReactElement {
  const [said, setSaid] = useState('');
  const fill = (name: 'lat' | 'lng', value: number): void => {
    const input = document.getElementById(fieldId(name));
    if (!(input instanceof HTMLInputElement)) return;
    input.value = value.toFixed(5);
    input.dispatchEvent(new Event('input', { bubbles: true }));
  };
  const find = (): void => {
    setSaid('Looking for your position.');
    navigator.geolocation.getCurrentPosition(
      ({ coords }) => {
        fill('lat', coords.latitude);
        fill('lng', coords.longitude);
        setSaid(`Pinned, to within about ${Math.max(1, Math.round(coords.accuracy * 3.281))} ft.`);
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

/** How a truck, a mill and people get there. */
export function AccessPart(): ReactElement {
  const { typed } = useForm();
  return (
    <Part id="access" number={4} title="Getting there" lead="A mill comes on a trailer, and a green log easily weighs a ton.">
      <div className="grid gap-6 sm:grid-cols-2">
        <Choose name="truck" legend="How close can a truck come?" options={trucks} />
        <Choose name="slope" legend="How does the ground lie?" options={slopes} />
        <Choose name="lines" legend="Overhead lines?" options={overheadLines} />
        <Choose name="machine" legend="A machine on site that can lift logs?" options={machines} />
      </div>
      <Care danger={slopeCautions(typed.slope)} />
      <Care danger={lineCautions(typed.lines)} />
      <div className="grid items-start gap-6 sm:grid-cols-2">
        <Line name="gateWidth" label="Narrowest gate on the way" optional width="medium" figure hint="A bare number is feet." placeholder="12 ft" />
        <Line name="machineNote" label="Which machine, and what it lifts" optional hint="Its rating at the load’s centre, not at the pins." maxLength={200} />
        <Line name="helpers" label="Grown-ups who can help" optional width="short" figure inputMode="numeric" hint="Nobody under 18 helps at the mill." placeholder="0" />
        <Choose name="water" legend="Water at the landing?" options={water} hint="For cooling the blade." inline />
      </div>
    </Part>
  );
}

/** Where the mill will stand and what is left behind. */
export function LandingPart(): ReactElement {
  return (
    <Part id="landing" number={5} title="The landing, and what is left over" lead="The landing is where the logs lie and the mill will stand.">
      <div>
        {landingTicks.map(({ value, label, hint }) => <Tick key={value} name={value} label={label} hint={hint} />)}
      </div>
      <div className="grid gap-6 sm:grid-cols-3">
        <Choose name="reDecks" legend="Who moves the logs to the mill?" options={reDeckers} />
        <Choose name="slabs" legend="Slabs" options={slabEnds} />
        <Choose name="sawdust" legend="Sawdust" options={sawdustEnds} />
      </div>
      <Lines name="landingNote" label="About the landing" optional rows={2} />
    </Part>
  );
}
