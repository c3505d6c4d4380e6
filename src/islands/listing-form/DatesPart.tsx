import type { ReactElement } from 'react';
import { matchSpecies } from '~/domain/timber/species.ts';
import { earliestSawBy } from '~/domain/timber/saw-by.ts';
import { woodCautions } from '~/domain/listing/cautions.ts';
import { addDays, formatDayWithYear, parseDay } from '~/domain/time.ts';
import { Care, Line, Lines, Part, useForm } from './parts.tsx';

/** Days that agreeing on a day and paying the hold usually take (common practice, no source). */
const DAYS_TO_AGREE = 14;

/** Until when sawyers may bid, beside the day the wood should be sawn by. */
export function DatesPart(): ReactElement {
  const { typed } = useForm();
  const codes = typed.logs.flatMap(({ species }) => matchSpecies(species)?.code ?? []);
  const down = parseDay(typed.cameDownOn);
  const saw = down.ok ? earliestSawBy(codes, down.value, typed.sealed === 'yes') : undefined;
  const closes = parseDay(typed.closesOn);
  const late = saw && closes.ok && addDays(closes.value, DAYS_TO_AGREE) > saw.date;
  return (
    <Part id="dates" number={8} title="Dates">
      <div className="grid gap-6 sm:grid-cols-2">
        <Line name="closesOn" label="Last day for bids" type="date" hint="You can choose a bid before then. Afterwards you have seven days to choose." figure />
        <div aria-live="polite">
          <p className="font-semibold">Best sawn by</p>
          {saw ? (
            <>
              <p className="figure mt-1 text-lg font-bold">{formatDayWithYear(saw.date)}</p>
              <p className="text-sm text-ink-soft">{saw.reason} A guide only ({saw.source}).</p>
              {late && <p className="mt-1 text-sm font-semibold text-amber">Bids close late for that: a day and the money take about two weeks to settle.</p>}
            </>
          ) : <p className="mt-1 text-sm text-ink-soft">Worked out from the species, the day it came down and whether the ends are sealed.</p>}
        </div>
      </div>
      <Care danger={down.ok ? woodCautions(codes, down.value) : null} />
      <Lines name="note" label="Anything else a sawyer should know" optional rows={4} />
    </Part>
  );
}
