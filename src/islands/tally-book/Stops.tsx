import { useState, type ReactElement, type ReactNode } from 'react';
import { formatCents, parseCents } from '~/domain/money.ts';
import { dayEstimate, estimateFacts } from '~/domain/trade/day-estimate.ts';
import { LandownersWord, type Word } from '~/islands/day/LandownersWord.tsx';
import { Field } from '~/islands/form/fields.tsx';
import type { TallyEntry } from '~/schemas/tally-entries.ts';
import type { TallyLog } from '~/schemas/tally-log.ts';
import type { TallyView } from '~/schemas/tally-view.ts';
import { summaryClass } from './Beside.tsx';
import type { Counted } from './count.ts';

interface StopsProps {
  readonly view: TallyView;
  readonly counted: Counted;
  /** The logs that are asked about here. */
  readonly logs: readonly TallyLog[];
  /** On the landowner's own phone. */
  readonly own?: boolean;
  readonly add: (...entries: TallyEntry[]) => void;
}

type What = Extract<TallyEntry, { kind: 'allow' }>['what'];
const allow = (what: What, { name, signature }: Word, more: { readonly logId?: string; readonly limitCents?: number } = {}): TallyEntry => ({ kind: 'allow', id: crypto.randomUUID(), what, logId: more.logId ?? null, limitCents: more.limitCents ?? null, name, signature });

/** Why the saw should stand still, and the landowner's word that lets it go on. */
export function Stops({ view, counted, logs, own = false, add }: StopsProps): ReactElement {
  const ask = own ? 'Read it and answer' : 'The landowner is here';
  return (
    <>
      {counted.warning !== 'none' && <NearTheHold {...{ view, counted, own, add }} />}
      {counted.metalStops && (
        <Stop title={`${view.hits.length} metal hits: ${own ? 'sawing stops until you allow more' : 'stop until the landowner allows more'}`} ask={ask}>
          <LandownersWord id="metal" action="Allow two more hits" own={own} onSign={(word) => add(allow('metal', word))}>
            <p>Metal is the landowner’s cost, at most {formatCents(view.terms.metalCapCents)} on this job. I allow two more hits.</p>
          </LandownersWord>
        </Stop>
      )}
      {logs.filter(({ waits }) => waits.length > 0).map((log) => (
        <Stop key={log.id} title={log.added ? `${log.label} is not on the listing` : `${log.label} is more than listed`} ask={ask}>
          <LandownersWord id={`log-${log.id}`} action={log.added ? 'Accept this log' : 'Agree to this log'} own={own} onSign={(word) => add(allow(log.added ? 'added-log' : 'larger-log', word, { logId: log.id }))}>
            <p>{log.speciesName}, {log.size}. {log.waits.join(' ')} {log.added ? 'Boards from it count once it is accepted.' : 'It is charged as listed until it is agreed.'}</p>
          </LandownersWord>
        </Stop>
      ))}
    </>
  );
}

/** What the day's measures make of the estimate, for both sides alike; nothing while every log lies as listed. */
export function ChangedEstimate({ view }: { readonly view: TallyView }): ReactElement | null {
  const estimate = view.bid && view.mill ? dayEstimate(view.logs, view.mill, view.bid, view.terms) : null;
  if (!estimate) return null;
  return (
    <details className="mt-2">
      <summary className={summaryClass}>Estimate on these measures · {formatCents(estimate.costCents.expected)}</summary>
      <dl className="pb-2">
        {estimateFacts(estimate, view.heldCents).map(([label, figure]) => (
          <div key={label} className="flex flex-wrap justify-between gap-x-3 border-b border-rule py-1"><dt>{label}</dt><dd className="figure">{figure}</dd></div>
        ))}
      </dl>
    </details>
  );
}

function Stop({ title, ask, children }: { readonly title: string; readonly ask: string; readonly children: ReactNode }): ReactElement {
  const [open, setOpen] = useState(false);
  return (
    <div className="mt-2 border-l-4 border-heartwood bg-sheet px-3 py-2" role="alert">
      <p className="font-semibold">{title}</p>
      {open ? children : <button type="button" className="min-h-glove font-bold text-crayon underline" onClick={() => setOpen(true)}>{ask}</button>}
    </div>
  );
}

const titles = { 'at-80': 'The work is at 80 % of what is allowed', 'at-95': 'The work is at 95 % of what is allowed', stop: 'The work has reached what is allowed: stop' } as const;

function NearTheHold({ view, counted, own = false, add }: Omit<StopsProps, 'logs'>): ReactElement | null {
  const [amount, setAmount] = useState('');
  const [problem, setProblem] = useState<string>();
  if (counted.warning === 'none') return null;
  const sign = (word: Word): void => {
    const read = parseCents(amount);
    if (read === null || read <= counted.limitCents) return setProblem(`Write an amount above ${formatCents(counted.limitCents)}.`);
    add(allow('increase', word, { limitCents: read }));
  };
  return (
    <Stop title={`${titles[counted.warning]}: ${formatCents(counted.job.costCents)} of ${formatCents(counted.limitCents)}`} ask={own ? 'Allow more' : 'The landowner allows more'}>
      <LandownersWord id="increase" action="Allow this much" own={own} onSign={sign}>
        <p>{formatCents(view.heldCents)} is held. What is allowed above that is certain for the sawyer only once the landowner has added it to the hold.</p>
        <div className="mt-3"><Field name="increase" label="The job may come to, in all" prefix="$" inputMode="decimal" figure width="medium" value={amount} error={problem} onChange={(event) => setAmount(event.target.value)} /></div>
      </LandownersWord>
    </Stop>
  );
}
