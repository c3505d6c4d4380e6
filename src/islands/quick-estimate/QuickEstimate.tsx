import { useEffect, useMemo, useRef, useState, type ReactElement } from 'react';
import { problemAt } from '~/components/field-ids.ts';
import { formatFeet, formatInches } from '~/domain/measure.ts';
import { paths } from '~/domain/paths.ts';
import { writeLogs } from '~/domain/timber/logs-in-url.ts';
import { FIRST_YIELD } from '~/domain/sawing/expected.ts';
import { logRuleNames } from '~/domain/timber/log-rules.ts';
import { LogEnd } from '../drawing/LogEnd.tsx';
import { Button } from '../form/choices.tsx';
import { Field, Select, type Option } from '../form/fields.tsx';
import { firstTyped, workOut, type Typed, type WorkedOut } from './work-out.ts';

interface Props {
  readonly typed?: Typed;
  readonly species: readonly Option[];
}

const whole = (figure: number): string => Math.round(figure).toLocaleString('en-US');

/** "What is in this log?": one log scaled by three rules as it is typed. Without a script the same form asks the server. */
export default function QuickEstimate({ typed: given = firstTyped, species }: Props): ReactElement {
  const [typed, setTyped] = useState(given);
  const [live, setLive] = useState(false);
  const form = useRef<HTMLFormElement>(null);
  useEffect(() => {
    setLive(true);
    // The fields keep their own text, so that what was typed before the script came is read here and not put back.
    const there = new FormData(form.current ?? undefined);
    setTyped((before) => ({ species: String(there.get('species') ?? before.species), smallEnd: String(there.get('smallEnd') ?? before.smallEnd), length: String(there.get('length') ?? before.length) }));
  }, []);
  const { worked, problems } = useMemo(() => workOut(typed), [typed]);
  const [last, setLast] = useState(worked);
  if (worked && worked !== last) setLast(worked);
  const change = (name: keyof Typed) => (event: { target: { value: string } }) => setTyped((before) => ({ ...before, [name]: event.target.value }));
  return (
    <form ref={form} className="sheet p-5 sm:p-7" method="get" action="/#estimate" id="estimate" aria-labelledby="estimate-title" onSubmit={live ? (event) => event.preventDefault() : undefined}>
      <h2 id="estimate-title">What is in this log?</h2>
      <p className="mt-1 text-sm text-ink-soft">Measure across the small end, inside the bark: two readings at right angles, halved.</p>
      <div className="mt-4 grid gap-x-3 gap-y-4 sm:grid-cols-3">
        <Select name="species" label="Species" options={species} defaultValue={given.species} onChange={change('species')} error={problemAt(problems, 'species')} />
        <Field name="smallEnd" label="Small end" suffix="in" figure inputMode="text" autoComplete="off" defaultValue={given.smallEnd} onChange={change('smallEnd')} error={problemAt(problems, 'smallEnd')} />
        <Field name="length" label="Length" suffix="ft" figure inputMode="text" autoComplete="off" defaultValue={given.length} onChange={change('length')} error={problemAt(problems, 'length')} />
      </div>
      {/* Only where no script will ever run: a button that goes away once one does would move what is below. */}
      <noscript><div className="mt-4"><Button type="submit">Work it out</Button></div></noscript>
      {last && <Answer worked={last} stale={worked === null} />}
    </form>
  );
}

function Answer({ worked, stale }: { readonly worked: WorkedOut; readonly stale: boolean }): ReactElement {
  const { log, estimate, weightLb, barkIn, speciesName, boards, bestBoardFeet } = worked;
  const lines = [
    { label: logRuleNames.internationalQuarter, value: `${whole(estimate.boardFeet.internationalQuarter)} bf` },
    { label: logRuleNames.scribnerDecimalC, value: `${whole(estimate.boardFeet.scribnerDecimalC)} bf` },
    { label: logRuleNames.doyle, value: `${whole(estimate.boardFeet.doyle)} bf` },
    { label: 'Green weight, with bark', value: `${whole(Math.round(weightLb / 10) * 10)} lb` },
  ];
  return (
    <div className={`mt-5 grid items-center gap-6 sm:grid-cols-[184px_1fr] ${stale ? 'opacity-50' : ''}`}>
      <div className="mx-auto max-w-[184px]">
        <LogEnd smallEndIn={log.smallEndIn} barkIn={barkIn} boards={boards} seed="first page" scaleBarIn={log.smallEndIn >= 12 ? 12 : 6} label={`The small end of the log to scale, ${formatInches(log.smallEndIn)} across, with its ${boards.length} boards`} />
      </div>
      <div>
        <dl aria-live="polite">
          {lines.map((line) => (
            <div className="flex items-baseline justify-between gap-4 border-b border-rule py-2" key={line.label}>
              <dt>{line.label}</dt>
              <dd className="figure whitespace-nowrap">{line.value}</dd>
            </div>
          ))}
        </dl>
        <p className="mt-2 text-sm text-ink-soft">
          {`${speciesName}, ${formatFeet(log.lengthFt)}. `}
          {boards.length > 0 && <>Sawn live into 5/4 on a band mill, kerf 3/32 in: at best <strong className="figure">{whole(bestBoardFeet)} bf</strong> of lumber, about <strong className="figure">{whole(bestBoardFeet * FIRST_YIELD)} bf</strong> to expect.</>}
        </p>
        <p className="mt-1"><a className="inline-flex min-h-target items-center font-semibold" href={`${paths.estimator}?logs=${writeLogs([log])}`}>Add more logs</a></p>
      </div>
    </div>
  );
}
