import { useState, type ReactElement } from 'react';
import { told } from '~/domain/cautions.ts';
import { parseNumber } from '~/domain/measure.ts';
import { eachLog, type LogGroup } from '~/domain/timber/logs-in-url.ts';
import { speciesOf } from '~/domain/timber/species.ts';
import { canLift, greenWeightWithBark, loadMargin, planTrips } from '~/domain/timber/weight.ts';
import { Field } from '~/islands/form/fields.tsx';
import { countOf, sayWeight, wholeNumber, type Units } from '~/islands/logs/words.ts';
import { Cautions } from './Cautions.tsx';

/** How many trips a trailer needs, and which logs a loader may lift, with a fifth kept in hand. */
export function Loads({ logs, units }: { readonly logs: readonly LogGroup[]; readonly units: Units }): ReactElement {
  const [trailer, setTrailer] = useState('');
  const [loader, setLoader] = useState('');
  const weights = eachLog(logs).map((log) => greenWeightWithBark(log, speciesOf(log.species)));
  const perUnit = units === 'us' ? 1 : 1 / 0.45359237;
  const rating = (text: string): number | null => {
    const value = parseNumber(text.replace(/\s*(lbs?|pounds|kg)\.?$/i, ''));
    return value === null || value <= 0 ? null : value * perUnit;
  };
  const [rated, lift] = [rating(trailer), rating(loader)];
  const trips = rated === null ? null : planTrips(weights, rated);
  const liftable = lift === null ? null : weights.filter((weight) => canLift(weight, lift)).length;
  const unit = units === 'us' ? 'lb' : 'kg';
  const heaviest = Math.max(...weights);
  return (
    <div className="grid gap-x-8 gap-y-4 sm:grid-cols-2">
      <div>
        <Field name="trailer" label="Trailer, rated load" hint="Its weight rating less its own weight." suffix={unit} figure inputMode="decimal" autoComplete="off" value={trailer} onChange={(event) => setTrailer(event.target.value)} />
        <p className="mt-2" role="status">
          {trips && (trips.tooHeavy.length > 0 ? `${countOf(trips.tooHeavy.length, 'log')} too heavy for it alone. ` : '')}
          {trips && trips.loads.length > 0 && `${countOf(trips.loads.length, 'trip')}: ${trips.loads.map((load) => sayWeight(load.weightLb, units)).join(', ')}.`}
        </p>
      </div>
      <div>
        <Field name="loader" label="Loader, rating at the load’s centre" hint="Not at the pins: ask for the figure out where the log will hang." suffix={unit} figure inputMode="decimal" autoComplete="off" value={loader} onChange={(event) => setLoader(event.target.value)} />
        <p className="mt-2" role="status">{liftable !== null && `It may lift ${wholeNumber(liftable)} of ${countOf(weights.length, 'log')}; the heaviest is ${sayWeight(heaviest, units)}.`}</p>
      </div>
      <p className="text-sm text-ink-soft sm:col-span-2">Only {Math.round(loadMargin * 100)} % of a rating is used (common practice, no source): green logs differ, and weights here include the bark.</p>
      <div className="sm:col-span-2"><Cautions cautions={told('lifting', 'rolling', 'trailer', 'tieDowns')} /></div>
    </div>
  );
}
