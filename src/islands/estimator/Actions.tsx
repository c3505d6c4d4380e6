import Papa from 'papaparse';
import { useState, type ReactElement } from 'react';
import { buttonKinds } from '~/components/classes.ts';
import { paths } from '~/domain/paths.ts';
import { writeLogTable } from '~/domain/timber/log-table.ts';
import { writeLogs, type LogGroup } from '~/domain/timber/logs-in-url.ts';
import { Button } from '~/islands/form/choices.tsx';
import type { Units } from '~/islands/logs/words.ts';
import { linkQuery, type Settings } from './use-estimator.ts';

interface ActionsProps {
  readonly logs: readonly LogGroup[];
  readonly settings: Settings;
  readonly units: Units;
}

function download(name: string, text: string): void {
  const address = URL.createObjectURL(new Blob([text], { type: 'text/csv;charset=utf-8' }));
  const link = Object.assign(document.createElement('a'), { href: address, download: name });
  link.click();
  URL.revokeObjectURL(address);
}

/** What can be done with the list: list the logs, share, print, save. */
export function Actions({ logs, settings, units }: ActionsProps): ReactElement {
  const [said, setSaid] = useState('');
  const query = linkQuery({ logs, settings, units });
  const copy = async (): Promise<void> => {
    if (query === null) return setSaid('The list is too long for a link. Save it as CSV and send the file.');
    try {
      await navigator.clipboard.writeText(`${window.location.origin}${paths.estimator}?${query}`);
      setSaid('The link is copied. Whoever opens it sees these logs.');
    } catch {
      setSaid('Copy the address of this page: it carries the logs.');
    }
  };
  return (
    <div className="no-print">
      <div className="flex flex-wrap items-center gap-x-5 gap-y-3">
        {query !== null && <a className={buttonKinds.primary} href={`${paths.newListing}?logs=${encodeURIComponent(writeLogs(logs))}`}>List these logs</a>}
        <Button kind="outlined" onClick={() => void copy()}>Copy a link</Button>
        <Button kind="outlined" onClick={() => window.print()}>Print</Button>
        <Button kind="outlined" onClick={() => download('logs.csv', Papa.unparse(writeLogTable(logs, settings).map((row) => [...row])))}>Save as CSV</Button>
        <form method="post" action={`${paths.estimator}/logs.pdf`} target="_blank">
          <input type="hidden" name="logs" value={writeLogs(logs)} />
          <input type="hidden" name="half" value={settings.halfInchRounding} />
          <input type="hidden" name="longest" value={settings.longestScalingLengthFt} />
          <Button kind="outlined" type="submit">Save as PDF</Button>
        </form>
      </div>
      {query === null && <p className="mt-2">This list is too long to carry into a listing at once. List fewer logs at a time.</p>}
      <p className="mt-2" role="status">{said}</p>
    </div>
  );
}
