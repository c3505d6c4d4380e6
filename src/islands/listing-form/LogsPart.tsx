import type { ReactElement } from 'react';
import { barkChoices } from '~/domain/listing/answers.ts';
import { isBlankLog, MOST_LOGS } from '~/domain/listing/draft.ts';
import { totalFigures, wholeNumber } from '~/domain/listing/figures.ts';
import { readLogRow } from '~/domain/listing/rows.ts';
import { logRuleNames, whyRulesDiffer } from '~/domain/timber/log-rules.ts';
import { speciesList } from '~/domain/timber/species.ts';
import { Button } from '../form/choices.tsx';
import { LogRow } from './LogRow.tsx';
import { Choose, Part, useForm } from './parts.tsx';
import type { Rows } from './use-rows.ts';
import type { LogTyped } from '~/domain/listing/draft.ts';

/** The logs, one by one, with their sums. */
export function LogsPart({ rows }: { readonly rows: Rows<LogTyped> }): ReactElement {
  const { typed } = useForm();
  const measured = typed.measured === 'over' ? 'over' : 'inside';
  const understood = typed.logs.flatMap((log) => {
    const read = isBlankLog(log) ? null : readLogRow(log, measured);
    return read?.ok ? [read.value] : [];
  });
  const frameIn = Math.max(12, ...understood.map(({ smallEndIn }) => smallEndIn)) * 1.12;
  return (
    <Part id="logs" number={2} title="The logs" lead="Measure across the small end, twice at right angles when it is oval: write 14 x 15. Inches and fractions, feet and inches, or centimetres, as they stand on your tape.">
      <Choose name="measured" legend="You measured" options={barkChoices} inline />
      <div className="border-t border-rule">
        {rows.list.map((row, index) => (
          <LogRow key={row.key} index={index} opened={row.opened} typed={typed.logs[index] ?? row.opened} measured={measured} frameIn={frameIn} problem={row.problem} onRemove={rows.list.length > 1 ? () => rows.remove(index) : null} />
        ))}
      </div>
      <datalist id="species-names">{speciesList.map(({ code, name }) => <option value={name} key={code} />)}</datalist>
      {rows.list.length < MOST_LOGS && (
        <div><Button kind="outlined" type="submit" name="deed" value="add-log" formNoValidate onClick={(event) => { event.preventDefault(); rows.add(); }}>Add another log</Button></div>
      )}
      {understood.length > 0 && <Sums logs={understood} rows={rows.list.length} />}
    </Part>
  );
}

function Sums({ logs, rows }: { readonly logs: Parameters<typeof totalFigures>[0]; readonly rows: number }): ReactElement {
  const total = totalFigures(logs);
  return (
    <div className="sheet p-5" aria-live="polite" aria-atomic="true">
      <h3>{logs.length < rows ? `${logs.length} of ${rows} logs` : logs.length === 1 ? 'This log' : `All ${logs.length} logs`}</h3>
      <dl className="mt-2">
        {(['internationalQuarter', 'scribnerDecimalC', 'doyle'] as const).map((rule) => (
          <div className="flex items-baseline justify-between gap-4 border-b border-rule py-1.5" key={rule}><dt>{logRuleNames[rule]}</dt><dd className="figure font-bold">{wholeNumber(total.boardFeet[rule])} bf</dd></div>
        ))}
        <div className="flex items-baseline justify-between gap-4 py-1.5"><dt>Green weight, with bark</dt><dd className="figure font-bold">{wholeNumber(Math.round(total.weightLb / 10) * 10)} lb</dd></div>
      </dl>
      <p className="mt-2 max-w-prose text-sm text-ink-soft">A tape at home reads high more often than low: by International ¼ expect {wholeNumber(total.low)} to {wholeNumber(total.high)} bf. {whyRulesDiffer}</p>
    </div>
  );
}
