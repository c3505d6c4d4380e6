import { useState, type ReactElement } from 'react';
import { buttonKinds, gloveSize, join } from '~/components/classes.ts';
import { correctionWords } from '~/domain/trade/clock.ts';
import { Field, Select } from '~/islands/form/fields.tsx';
import type { TallyEntry } from '~/schemas/tally-entries.ts';
import type { TallyView } from '~/schemas/tally-view.ts';
import { TakeOne, type Photographs } from './Photographs.tsx';
import type { Clock } from './use-clock.ts';
import { timeOfDay } from '../clock.ts';

interface BesideProps {
  readonly view: TallyView;
  readonly logId: string | null;
  readonly add: (...entries: TallyEntry[]) => void;
}

const newId = (): string => crypto.randomUUID();
const time = (iso: string): string => timeOfDay(iso);

/** Hours as they were typed, as instants; or, in words, why they cannot be. @param others the hours beside which they have to fit */
function readHours(day: string, from: string, to: string, others: readonly { readonly startsAt: string; readonly endsAt: string }[]): { readonly startsAt: string; readonly endsAt: string } | string {
  const startsAt = new Date(`${day}T${from}`);
  const endsAt = new Date(`${day}T${to}`);
  if (Number.isNaN(startsAt.getTime()) || Number.isNaN(endsAt.getTime())) return 'Choose the day and both times.';
  if (endsAt <= startsAt) return 'The end must be after the start.';
  if (others.some((other) => new Date(other.startsAt) < endsAt && startsAt < new Date(other.endsAt))) return 'This time overlaps another entry.';
  return { startsAt: startsAt.toISOString(), endsAt: endsAt.toISOString() };
}

/** The line that opens one of the book's further parts. */
export const summaryClass = 'flex min-h-glove cursor-pointer items-center border-t border-rule py-2 text-lg leading-snug font-bold text-crayon';

/** Blades that metal has cost: each a tap, each taken back with another, each with a photograph of what was hit. */
export function MetalHits({ view, logId, add, photographs }: BesideProps & { readonly photographs: Photographs }): ReactElement {
  const picturesOf = (hitId: string): number => new Set([...view.photos, ...photographs.here].filter((photo) => photo.hitId === hitId).map(({ id }) => id)).size;
  return (
    <details>
      <summary className={summaryClass}>Metal hits · {view.hits.length}</summary>
      <p className="max-w-prose text-ink-soft">Stop the blade and stand clear before you look. Follow the mill’s manual. After two hits sawing stops until the landowner allows more.</p>
      <div className="mt-2 flex flex-wrap gap-2">
        {(['re-sharpened', 'destroyed'] as const).map((outcome) => (
          <button key={outcome} type="button" className={join(buttonKinds.outlined, gloveSize)} onClick={() => add({ kind: 'hit', id: newId(), logId, outcome, note: '' })}>Blade {outcome}</button>
        ))}
      </div>
      <ul className="mt-2">
        {view.hits.map((hit) => (
          <li key={hit.id} className="border-b border-rule pb-2">
            <Taken text={`Blade ${hit.outcome}${picturesOf(hit.id) > 0 ? `, ${picturesOf(hit.id)} photographed` : ''}`} onUndo={() => add({ kind: 'remove', id: hit.id })} />
            <TakeOne label="Photograph the metal" onTake={(file) => photographs.take('metal', hit.id, file)} />
          </li>
        ))}
      </ul>
    </details>
  );
}

function Taken({ text, onUndo }: { readonly text: string; readonly onUndo: () => void }): ReactElement {
  return (
    <div className="flex items-center justify-between gap-3">
      <span>{text}</span>
      <button type="button" className={buttonKinds.quiet} onClick={onUndo}>Take back<span className="sr-only">: {text}</span></button>
    </div>
  );
}

/** A log that was opened and left: why, and what opening it took. */
export function CullLogs({ view, logId, add }: BesideProps): ReactElement {
  const [reason, setReason] = useState('');
  const [minutes, setMinutes] = useState('');
  const [problem, setProblem] = useState<string | undefined>();
  const label = view.logs.find(({ id }) => id === logId)?.label ?? 'this log';
  const take = (): void => {
    if (reason.trim() === '') return setProblem('Say why it is a cull log.');
    const openingMinutes = Math.round(Number(minutes || '0'));
    if (!(openingMinutes >= 0 && openingMinutes <= 600)) return setProblem('Write the opening time as minutes, like 20.');
    add({ kind: 'cull', id: newId(), logId, reason: reason.trim(), openingMinutes, passes: 0 });
    setReason('');
    setMinutes('');
    setProblem(undefined);
  };
  return (
    <details>
      <summary className={summaryClass}>Cull logs · {view.culls.length}</summary>
      <div className="grid gap-3 pb-3">
        <Field name="cullReason" label={`Why ${label} is a cull log`} value={reason} error={problem} onChange={(event) => setReason(event.target.value)} />
        <Field name="cullMinutes" label="Opening time, minutes" inputMode="numeric" figure width="short" value={minutes} onChange={(event) => setMinutes(event.target.value)} />
        <p><button type="button" className={join(buttonKinds.outlined, gloveSize)} onClick={take}>Record the cull log</button></p>
      </div>
      <ul>{view.culls.map((cull) => <li key={cull.id} className="border-b border-rule"><Taken text={`${view.logs.find(({ id }) => id === cull.logId)?.label ?? 'A log'}: ${cull.reason}${cull.openingMinutes ? `, ${cull.openingMinutes} min` : ''}`} onUndo={() => add({ kind: 'remove', id: cull.id })} /></li>)}</ul>
    </details>
  );
}

const activities = [
  { value: 'sawing', label: 'Sawing' },
  { value: 'preparing', label: 'Arriving and setting up' },
  { value: 'waiting', label: 'Waiting for the landowner' },
  { value: 'breakdown', label: 'Own breakdown (off the clock)' },
  { value: 'sharpening', label: 'Sharpening (off the clock)' },
] as const;

const dayOf = (iso: string): string => new Date(iso).toLocaleDateString('en-CA');
const clockField = (iso: string): string => new Date(iso).toTimeString().slice(0, 5);

/** Puts one entry's hours right, with a reason: the landowner sees both. */
function PutRight({ entry, others, onCorrect }: { readonly entry: TallyView['clock'][number]; readonly others: TallyView['clock']; readonly onCorrect: (startsAt: string, endsAt: string, reason: string) => void }): ReactElement {
  const [open, setOpen] = useState(false);
  const [day, setDay] = useState(dayOf(entry.startsAt));
  const [from, setFrom] = useState(clockField(entry.startsAt));
  const [to, setTo] = useState(clockField(entry.endsAt));
  const [reason, setReason] = useState('');
  const [problem, setProblem] = useState<string | undefined>();
  const take = (): void => {
    const hours = readHours(day, from, to, others);
    if (typeof hours === 'string') return setProblem(hours);
    if (reason.trim() === '') return setProblem('Say why, in a few words.');
    onCorrect(hours.startsAt, hours.endsAt, reason.trim());
    setReason('');
    setProblem(undefined);
    setOpen(false);
  };
  if (!open) return <button type="button" className={buttonKinds.quiet} onClick={() => setOpen(true)}>Put right<span className="sr-only"> the hours from {time(entry.startsAt)}</span></button>;
  return (
    <div className="grid gap-3 border-l-4 border-ink pb-3 pl-3 sm:grid-cols-2">
      <Field name={`day-${entry.id}`} label="Day" type="date" figure value={day} onChange={(event) => setDay(event.target.value)} />
      <Field name={`from-${entry.id}`} label="From" type="time" figure value={from} error={problem} onChange={(event) => setFrom(event.target.value)} />
      <Field name={`to-${entry.id}`} label="To" type="time" figure value={to} onChange={(event) => setTo(event.target.value)} />
      <Field name={`why-${entry.id}`} label="Why" hint="The landowner reads this beside both times." maxLength={200} value={reason} onChange={(event) => setReason(event.target.value)} />
      <p><button type="button" className={join(buttonKinds.outlined, gloveSize)} onClick={take}>Put the hours right</button></p>
    </div>
  );
}

/** What the time goes to, by one tap: the clock that ran before becomes an entry. */
function TheClock({ clock }: { readonly clock: Clock }): ReactElement {
  const { running, turnTo } = clock;
  return (
    <fieldset className="pb-3">
      <legend className="text-sm">The clock, now</legend>
      <div className="mt-1 grid grid-cols-2 gap-2">
        {activities.map(({ value, label }) => (
          <button key={value} type="button" aria-pressed={running?.activity === value} className={join('min-h-glove rounded border-2 border-ink px-2 font-bold', running?.activity === value ? 'bg-ink text-paper' : 'bg-sheet')} onClick={() => turnTo(running?.activity === value ? null : value)}>{label}</button>
        ))}
        <button type="button" className="min-h-glove rounded border-2 border-heartwood bg-sheet px-2 font-bold text-heartwood" disabled={!running} onClick={() => turnTo(null)}>Stop the clock</button>
      </div>
      <p className="mt-2" role="status">{running ? `${activities.find(({ value }) => value === running.activity)?.label ?? ''} since ${time(running.startsAt)}. It runs on with the phone off, and is entered when you stop it or tap another.` : 'Stopped. Tap what the time goes to, or type hours below.'}</p>
    </fieldset>
  );
}

/** Hours, when they are charged or the landowner kept the mill waiting. */
export function Hours({ view, add, clock }: BesideProps & { readonly clock: Clock }): ReactElement {
  const [activity, setActivity] = useState<(typeof activities)[number]['value']>(view.terms.card.basis.kind === 'hourly' ? 'sawing' : 'waiting');
  const [from, setFrom] = useState('');
  const [to, setTo] = useState('');
  const [day, setDay] = useState(() => new Date().toLocaleDateString('en-CA'));
  const [problem, setProblem] = useState<string | undefined>();
  const take = (): void => {
    const hours = readHours(day, from, to, view.clock);
    if (typeof hours === 'string') return setProblem(hours);
    add({ kind: 'clock', id: newId(), activity, ...hours });
    setFrom('');
    setTo('');
    setProblem(undefined);
  };
  return (
    <details open={view.terms.card.basis.kind === 'hourly'}>
      <summary className={summaryClass}>Hours · {view.clock.length}</summary>
      <TheClock clock={clock} />
      <div className="grid gap-3 pb-3 sm:grid-cols-2">
        <Select name="activity" label="What the time was" options={activities} value={activity} onChange={(event) => setActivity(event.target.value as typeof activity)} />
        <Field name="clockDay" label="Day" type="date" figure value={day} onChange={(event) => setDay(event.target.value)} />
        <Field name="clockFrom" label="From" type="time" figure value={from} error={problem} onChange={(event) => setFrom(event.target.value)} />
        <Field name="clockTo" label="To" type="time" figure value={to} onChange={(event) => setTo(event.target.value)} />
        <p><button type="button" className={join(buttonKinds.outlined, gloveSize)} onClick={take}>Add the time</button></p>
      </div>
      <ul>{view.clock.map((entry) => <li key={entry.id} className="border-b border-rule"><Taken text={`${activities.find(({ value }) => value === entry.activity)?.label ?? entry.activity}, ${time(entry.startsAt)} to ${time(entry.endsAt)}${correctionWords(entry, time)}`} onUndo={() => add({ kind: 'remove', id: entry.id })} /><PutRight key={entry.startsAt + entry.endsAt} entry={entry} others={view.clock.filter(({ id }) => id !== entry.id)} onCorrect={(startsAt, endsAt, reason) => add({ kind: 'correctClock', id: newId(), clockId: entry.id, startsAt, endsAt, reason })} /></li>)}</ul>
    </details>
  );
}

/** Counts that the rate card charges for beside the sawing. Only what it offers is asked. */
export function Extras({ view, add }: BesideProps): ReactElement | null {
  const { extras: prices } = view.terms.card;
  const asked = [
    ...(prices.stickerEach === null ? [] : [{ field: 'stickers' as const, label: 'Stickers brought' }]),
    ...(prices.movingMill === null ? [] : [{ field: 'millMoves' as const, label: 'Mill moved, times' }]),
    ...(prices.deliveryPerLoad === null ? [] : [{ field: 'deliveryLoads' as const, label: 'Loads delivered' }]),
    { field: 'rainReturns' as const, label: 'Sent home by rain and come back, times' },
  ];
  return (
    <details>
      <summary className={summaryClass}>Extras</summary>
      <div className="grid gap-3 pb-3 sm:grid-cols-2">
        {asked.map(({ field, label }) => (
          <Field key={field} name={field} label={label} type="number" min={0} step={1} figure width="short" value={view.extras[field]} onChange={(event) => {
            const value = Math.max(0, Math.floor(Number(event.target.value) || 0));
            if (value <= (field === 'rainReturns' ? 10 : field === 'millMoves' ? 20 : field === 'deliveryLoads' ? 50 : 5000)) add({ kind: 'extras', id: newId(), [field]: value });
          }} />
        ))}
        {view.terms.waste !== 'left' && (
          <Select name="wasteDone" label="Slabs and sawdust" value={view.extras.wasteDone} options={[{ value: view.terms.waste, label: `${view.terms.waste} as agreed` }, { value: 'left', label: 'left at the landing' }]} onChange={(event) => add({ kind: 'extras', id: newId(), wasteDone: event.target.value === 'left' ? 'left' : view.terms.waste })} />
        )}
      </div>
    </details>
  );
}
