import Papa from 'papaparse';
import { useState, type ReactElement } from 'react';
import { readLogTable, type LogTable } from '~/domain/timber/log-table.ts';
import type { LogGroup } from '~/domain/timber/logs-in-url.ts';
import { Button } from '~/islands/form/choices.tsx';
import { Field, TextArea } from '~/islands/form/fields.tsx';
import { countOf } from '~/islands/logs/words.ts';

const example = 'Species\tSmall end\tLength\twhite oak\t18 3/8\t12 ft 6 in'.replace(/\t(white)/, '\n$1');

/** Larger than any list of a thousand logs. */
const largestFile = 500_000;

/** A table from a spreadsheet, pasted or as a file. What cannot be read is named by line and column; the rest can be added at once. */
export function PasteTable({ onAdd }: { readonly onAdd: (logs: readonly LogGroup[]) => void }): ReactElement {
  const [text, setText] = useState('');
  const [table, setTable] = useState<LogTable | null>(null);
  const [failed, setFailed] = useState('');

  const read = (typed: string): LogTable => {
    const found = readLogTable(Papa.parse<string[]>(typed.trimEnd()).data);
    setTable(found);
    return found;
  };
  const open = async (file: File | undefined): Promise<void> => {
    if (!file) return;
    if (file.size > largestFile) return setFailed('That file is larger than a list of logs. Save the sheet as CSV and choose that.');
    const content = await file.text();
    if (content.includes('\u0000')) return setFailed('That is not a text file. Save the sheet as CSV and choose that.');
    setFailed('');
    setText(content);
    read(content);
  };
  const add = (): void => {
    const found = read(text);
    if (found.logs.length === 0) return;
    onAdd(found.logs);
    if (found.problems.length === 0) {
      setText('');
      setTable(null);
    }
  };

  return (
    <div className="grid max-w-prose gap-4">
      <TextArea name="paste" label="Paste a table" hint="From a spreadsheet or a message: species, small end, length, and if you have them large end and count. Inches, feet, centimetres and fractions all work." rows={6} placeholder={example} value={text} onChange={(event) => { setText(event.target.value); setTable(null); }} />
      <Field name="file" label="or choose a CSV file" type="file" accept=".csv,.tsv,.txt,text/csv,text/plain" error={failed === '' ? undefined : failed} onChange={(event) => void open(event.target.files?.[0])} />
      {table && table.problems.length > 0 && (
        <div role="alert" className="border-l-4 border-heartwood pl-3">
          <p className="font-bold">{countOf(table.problems.length, 'cell')} cannot be read. {table.logs.length > 0 && `${countOf(table.logs.length, 'line')} can.`}</p>
          <ul className="list-disc pl-5">
            {table.problems.slice(0, 50).map((problem, index) => <li key={index}>Line {problem.line}{problem.column !== '' && `, ${problem.column}`}: {problem.message}</li>)}
          </ul>
          {table.problems.length > 50 && <p>and {table.problems.length - 50} more.</p>}
        </div>
      )}
      {table && table.unused.length > 0 && <p className="text-sm text-ink-soft">Not used: {table.unused.join(', ')}.</p>}
      <div className="flex flex-wrap gap-4">
        <Button onClick={add} disabled={text.trim() === ''}>{table && table.problems.length > 0 && table.logs.length > 0 ? `Add the ${countOf(table.logs.length, 'line')} that can be read` : 'Add these logs'}</Button>
      </div>
    </div>
  );
}
