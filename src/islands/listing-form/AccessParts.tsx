import type { ReactElement } from 'react';
import { landingTicks, machines, overheadLines, reDeckers, sawdustEnds, slabEnds, slopes, trucks, water } from '~/domain/listing/answers.ts';
import { lineCautions, slopeCautions } from '~/domain/listing/cautions.ts';
import { Care, Choose, Line, Lines, Part, Tick, useForm } from './parts.tsx';

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
