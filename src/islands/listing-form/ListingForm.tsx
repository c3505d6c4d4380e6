import { useCallback, useEffect, useLayoutEffect, useRef, useState, type KeyboardEvent, type ReactElement, type SubmitEvent } from 'react';
import { blankLog, blankPiece, listingFromFields, typedOver, type Answer, type ListingTyped } from '~/domain/listing/draft.ts';
import { paths } from '~/domain/paths.ts';
import type { Problem } from '~/domain/result.ts';
import { dayAndTime } from '../clock.ts';
import { Button } from '../form/choices.tsx';
import { DatesPart } from './DatesPart.tsx';
import { newId } from './ids.ts';
import { forgetLocal, readLocal, type LocalDraft } from './local-draft.ts';
import { LogsPart } from './LogsPart.tsx';
import { FormContext } from './parts.tsx';
import { PiecesPart } from './PiecesPart.tsx';
import { AccessPart, LandingPart } from './AccessParts.tsx';
import { PlacePart } from './PlacePart.tsx';
import { SaveLine } from './SaveLine.tsx';
import { MetalPart, TreePart } from './TreePart.tsx';
import { useDraft } from './use-draft.ts';
import { useRows } from './use-rows.ts';

export interface ListingFormProps {
  /** Null for one that was never saved. */
  readonly number: number | null;
  readonly typedVersion: number | null;
  readonly typed: ListingTyped;
  readonly problems: readonly Problem[];
  readonly signedIn: boolean;
  readonly isDraft: boolean;
  /** True when `typed` is what was just sent: newer than anything this browser kept. */
  readonly sent: boolean;
  /** True when the logs came with the address: they take the place of those this browser kept. */
  readonly logsGiven: boolean;
}

const steps = [
  ['tree', 'The tree'], ['logs', 'The logs'], ['place', 'The place'], ['access', 'Getting there'], ['landing', 'The landing'], ['metal', 'Metal'], ['pieces', 'What to build'], ['dates', 'Dates'], ['photographs', 'Photographs'],
] as const;

const fieldsOf = (form: HTMLFormElement): ListingTyped => listingFromFields([...new FormData(form)].flatMap(([name, value]) => (typeof value === 'string' ? [[name, value] as const] : [])));

/**
 * The form as it stands before this script has touched it: on a slow connection people type before it wakes, and waking would put
 * back what a text area was opened with. Null where the browser may have filled fields by itself (going back).
 */
function typedBeforeWaking(): ListingTyped | null {
  if (typeof document === 'undefined') return null;
  const form = document.getElementById('listing-form');
  const [navigation] = performance.getEntriesByType('navigation') as PerformanceNavigationTiming[];
  return form instanceof HTMLFormElement && navigation?.type !== 'back_forward' ? fieldsOf(form) : null;
}

/** Where the cursor stands in the form, so that it can stand there again after the form is drawn anew. */
interface Cursor {
  readonly name: string;
  readonly start: number | null;
  readonly end: number | null;
}

function cursorNow(): Cursor | null {
  const at = document.activeElement;
  return (at instanceof HTMLInputElement && at.type === 'text') || at instanceof HTMLTextAreaElement ? { name: at.name, start: at.selectionStart, end: at.selectionEnd } : null;
}

/**
 * The form of a listing. The server draws it whole and it posts plainly without script; with script it works figures out while one
 * types, adds rows in place, and keeps everything: in this browser at once, in the account a moment later.
 */
export default function ListingForm(props: ListingFormProps): ReactElement {
  const [before] = useState(typedBeforeWaking);
  const [opened, setOpened] = useState<{ readonly typed: ListingTyped; readonly restored: number; readonly cursor: Cursor | null }>({ typed: props.typed, restored: 0, cursor: null });
  const [older, setOlder] = useState<LocalDraft | null>(null);
  const restore = (typed: ListingTyped): void => setOpened(({ restored }) => ({ typed, restored: restored + 1, cursor: cursorNow() }));

  useEffect(() => {
    const local = props.sent ? null : readLocal(props.number);
    const newest = local?.typedVersion === props.typedVersion ? local : null;
    if (local && !newest) setOlder(local);
    const base = !newest ? props.typed : props.logsGiven ? { ...newest.typed, logs: props.typed.logs } : newest.typed;
    const typed = before ? typedOver(props.typed, before, base) : base;
    if (typed !== props.typed) restore(typed);
  }, []);

  return (
    <>
      {older && (
        <div className="mb-6 border-l-4 border-amber bg-sheet px-4 py-3" role="status">
          <p className="font-bold text-amber">This browser kept other text for this listing</p>
          <p>It was typed {dayAndTime(older.at)} and never saved; the listing was saved elsewhere since.</p>
          <p className="flex flex-wrap gap-x-5">
            <Button kind="quiet" onClick={() => { restore(older.typed); setOlder(null); }}>Use the kept text</Button>
            <Button kind="quiet" onClick={() => { forgetLocal(props.number); setOlder(null); }}>Forget it</Button>
          </p>
        </div>
      )}
      <FormBody key={opened.restored} {...props} typed={opened.typed} problems={opened.restored === 0 ? props.problems : []} restored={opened.restored > 0} cursor={opened.cursor} />
    </>
  );
}

function FormBody(props: ListingFormProps & { readonly restored: boolean; readonly cursor: Cursor | null }): ReactElement {
  const form = useRef<HTMLFormElement>(null);
  const [typed, setTyped] = useState(props.typed);
  const read = useCallback((): ListingTyped => (form.current ? fieldsOf(form.current) : props.typed), [props.typed]);
  const draft = useDraft(props, read);
  const logs = useRows('logs', props.typed.logs, props.problems, (last) => blankLog(newId(), last?.species), () => read().logs);
  const pieces = useRows('pieces', props.typed.pieces, props.problems, blankPiece, () => read().pieces);

  useLayoutEffect(() => {
    if (!props.cursor) return;
    const field = form.current?.elements.namedItem(props.cursor.name);
    if (!(field instanceof HTMLInputElement || field instanceof HTMLTextAreaElement)) return;
    field.focus({ preventScroll: true });
    field.setSelectionRange(props.cursor.start, props.cursor.end);
  }, []);

  // The browser may have filled fields by itself before this script ran: going back, a restored tab.
  useEffect(() => {
    setTyped(read());
    if (props.restored || (props.sent && !props.signedIn)) draft.touched();
  }, []);
  const rowCount = `${logs.list.length} ${pieces.list.length}`;
  const firstCount = useRef(rowCount);
  useEffect(() => {
    if (firstCount.current === rowCount) return;
    firstCount.current = rowCount;
    changed();
  }, [rowCount]);

  const changed = (): void => {
    setTyped(read());
    draft.touched();
  };
  const onSubmit = (event: SubmitEvent<HTMLFormElement>): void => {
    if (draft.isSettled()) return;
    // Saved first, so that what is sent next is the newest and this browser has nothing left to keep.
    event.preventDefault();
    const submitter = event.nativeEvent.submitter;
    void draft.settle().then(() => form.current?.requestSubmit(submitter));
  };
  // Enter moves nothing and sends nothing by accident; buttons do.
  const onKeyDown = (event: KeyboardEvent<HTMLFormElement>): void => {
    if (event.key === 'Enter' && event.target instanceof HTMLInputElement && !['radio', 'checkbox'].includes(event.target.type)) event.preventDefault();
  };
  // A problem is of what was sent: once the answer is another, it has been seen to, or will be named again.
  const problem = (name: Answer): string | undefined => (typed[name] === props.typed[name] ? props.problems.find(({ path }) => path === name)?.message : undefined);
  const back = draft.number === null ? paths.newListing : paths.editListing(draft.number);

  return (
    <FormContext.Provider value={{ opened: props.typed, typed, problem }}>
      <div className="gap-10 lg:grid lg:grid-cols-[12rem_minmax(0,1fr)]">
        <nav className="hidden self-start lg:sticky lg:top-6 lg:block" aria-label="Parts of the form" data-chrome>
          <ol className="border-t border-rule">
            {steps.map(([id, title], index) => <li className="border-b border-rule" key={id}><a className="flex min-h-[40px] items-center gap-2 text-ink no-underline hover:underline" href={`#${id}`}><span className="figure text-heartwood">{index + 1}</span>{title}</a></li>)}
          </ol>
          <div className="mt-4"><SaveLine draft={draft} back={back} /></div>
        </nav>
        <details className="mb-6 border-y border-rule lg:hidden" data-chrome>
          <summary className="min-h-target py-2.5 font-semibold text-crayon">The {steps.length} parts of this form</summary>
          <nav aria-label="Parts of the form"><ol className="grid grid-cols-2 gap-x-4 pb-2">{steps.map(([id, title], index) => <li key={id}><a className="flex min-h-target items-center gap-2" href={`#${id}`}><span className="figure text-heartwood">{index + 1}</span>{title}</a></li>)}</ol></nav>
        </details>
        <form id="listing-form" ref={form} method="post" action={back} onInput={changed} onSubmit={onSubmit} onKeyDown={onKeyDown} noValidate>
          {/* The first button is the one that Enter presses where there is no script. */}
          <button className="sr-only" type="submit" name="deed" value={props.isDraft ? 'save' : 'revise'} tabIndex={-1} aria-hidden="true">Save</button>
          <input type="hidden" name="typedVersion" value={draft.typedVersion ?? ''} readOnly />
          <TreePart />
          <LogsPart rows={logs} />
          <PlacePart />
          <AccessPart />
          <LandingPart />
          <MetalPart />
          <PiecesPart rows={pieces} />
          <DatesPart />
          <div className="pb-6 lg:hidden"><SaveLine draft={draft} back={back} /></div>
        </form>
      </div>
    </FormContext.Provider>
  );
}
