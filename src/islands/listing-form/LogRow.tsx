import type { ReactElement } from 'react';
import { figuresOf, wholeNumber } from '~/domain/listing/figures.ts';
import { isBlankLog, type LogTyped } from '~/domain/listing/draft.ts';
import { readLogRow, type LogRead, type Measured } from '~/domain/listing/rows.ts';
import { logRuleNames } from '~/domain/timber/log-rules.ts';
import { barkRatio, trimOf } from '~/domain/timber/taper-and-bark.ts';
import { speciesOf } from '~/domain/timber/species.ts';
import { LogEnd } from '../drawing/LogEnd.tsx';
import { Button } from '../form/choices.tsx';
import { Field } from '../form/fields.tsx';

interface Props {
  readonly index: number;
  readonly opened: LogTyped;
  readonly typed: LogTyped;
  readonly measured: Measured;
  readonly frameIn: number;
  readonly problem: (field: string) => string | undefined;
  readonly onRemove: (() => void) | null;
}

/** One log: what is typed, and below it what that comes to. */
export function LogRow({ index, opened, typed, measured, frameIn, problem: sent, onRemove }: Props): ReactElement {
  const name = (field: string): string => `logs.${index}.${field}`;
  // Until the text is another: then the line below speaks.
  const problem = (field: keyof LogTyped): string | undefined => (typed[field] === opened[field] ? sent(field) : undefined);
  const read = isBlankLog(typed) ? null : readLogRow(typed, measured);
  const log = read?.ok ? read.value : null;
  return (
    <fieldset className="min-w-0 border-b border-rule pb-5 pt-4">
      <legend className="float-left mb-2 font-slab text-lg font-bold">Log {index + 1}</legend>
      <div className="clear-both grid gap-x-4 gap-y-3 sm:grid-cols-[5rem_1fr]">
        <div className="hidden h-20 w-20 items-center justify-center sm:flex">
          {log ? <LogEnd smallEndIn={log.smallEndIn} seed={log.id} frameIn={frameIn} sizePx={80} heartDefectIn={log.heartDefectIn ?? undefined} barkIn={(log.smallEndIn * (barkRatio(speciesOf(log.species)) - 1)) / 2} /> : <span className="block h-16 w-16 rounded-full border-2 border-dashed border-rule" aria-hidden="true" />}
        </div>
        <div className="grid min-w-0 grid-cols-2 items-start gap-3 sm:grid-cols-[1.6fr_1fr_1fr_1fr]">
          <input type="hidden" name={name('id')} value={opened.id} readOnly />
          <input type="hidden" name={name('defects')} value={opened.defects} readOnly />
          <div className="col-span-2 sm:col-span-1"><Field name={name('species')} label="Species" defaultValue={opened.species} list="species-names" autoComplete="off" error={problem('species')} /></div>
          <Field name={name('smallEnd')} label="Small end" defaultValue={opened.smallEnd} figure autoComplete="off" placeholder="14 1/2 in" error={problem('smallEnd')} />
          <Field name={name('largeEnd')} label="Large end" defaultValue={opened.largeEnd} figure autoComplete="off" placeholder="16 in" error={problem('largeEnd')} />
          <Field name={name('length')} label="Length" defaultValue={opened.length} figure autoComplete="off" placeholder="8 ft 6 in" error={problem('length')} />
        </div>
        <div className="min-w-0 sm:col-start-2">
          <Outcome typed={typed} log={log} problems={read && !read.ok ? read.problems : []} />
          <div className="flex flex-wrap items-start justify-between gap-x-6">
            <details className="min-w-0 flex-1" open={[opened.heart, opened.note].some((text) => text !== '') || problem('heart') !== undefined || problem('note') !== undefined}>
              <summary className="inline-flex min-h-target items-center text-crayon underline underline-offset-4">Rot, or a note about this log</summary>
              <div className="mb-2 mt-1 grid gap-3 sm:grid-cols-[1fr_2fr]">
                <Field name={name('heart')} label="Rot or hole in the heart" optional defaultValue={opened.heart} figure autoComplete="off" placeholder="3 in across" error={problem('heart')} />
                <Field name={name('note')} label="Note" optional defaultValue={opened.note} autoComplete="off" placeholder="Fork, sweep, an old nail" error={problem('note')} />
              </div>
            </details>
            {onRemove && <Button kind="quiet" type="submit" name="deed" value={`remove-log:${index}`} formNoValidate onClick={(event) => { event.preventDefault(); onRemove(); }}>Remove log {index + 1}</Button>}
          </div>
        </div>
      </div>
    </fieldset>
  );
}

const cell = 'flex items-baseline justify-between gap-3 border-t border-rule py-1 sm:block sm:border-0 sm:py-0';

function Outcome({ typed, log, problems }: { readonly typed: LogTyped; readonly log: LogRead | null; readonly problems: readonly { readonly path: string; readonly message: string }[] }): ReactElement {
  if (log) {
    const { boardFeet, weightLb } = figuresOf(log);
    const trim = trimOf(log.lengthFt);
    return (
      <>
        <dl className="grid gap-x-6 sm:grid-cols-4">
          {(['internationalQuarter', 'scribnerDecimalC', 'doyle'] as const).map((rule) => (
            <div className={cell} key={rule}><dt className="text-sm text-ink-soft">{logRuleNames[rule]}</dt><dd className="figure">{wholeNumber(boardFeet[rule])} bf</dd></div>
          ))}
          <div className={cell}><dt className="text-sm text-ink-soft">Green weight, with bark</dt><dd className="figure">{wholeNumber(Math.round(weightLb / 10) * 10)} lb</dd></div>
        </dl>
        {log.defects.length > 0 && <p className="mt-1 text-sm text-ink-soft">Less {log.defects.length === 1 ? 'one defect' : `${log.defects.length} defects`} that you gave in the estimator.</p>}
        {!trim.enough && trim.cleanFt >= 4 && <p className="mt-1 text-sm text-ink-soft">No trim to spare: with 4 to 6 in over the whole foot the boards come out a clean {trim.nominalFt} ft, as it is they are {trim.cleanFt} ft.</p>}
      </>
    );
  }
  // A field that is still empty is not a mistake while one is typing.
  const shown = problems.find(({ path }) => (typed as unknown as Record<string, string>)[path]?.trim() !== '');
  return <p className="text-sm text-ink-soft" aria-live="polite">{shown ? <span className="font-semibold text-heartwood">{shown.message}</span> : 'Board feet and weight appear here once species, small end and length are there.'}</p>;
}
