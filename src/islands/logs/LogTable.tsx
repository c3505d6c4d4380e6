import type { ReactElement, ReactNode } from 'react';
import { LogEnd } from '~/islands/drawing/LogEnd.tsx';
import { estimateLog } from '~/domain/timber/estimate.ts';
import { byRule, logRuleNames, type LogRule } from '~/domain/timber/log-rules.ts';
import type { ScaleSettings } from '~/domain/timber/log-scale.ts';
import type { LogGroup } from '~/domain/timber/logs-in-url.ts';
import { speciesOf } from '~/domain/timber/species.ts';
import { largeEndOrTaper } from '~/domain/timber/taper-and-bark.ts';
import { greenWeightWithBark } from '~/domain/timber/weight.ts';
import { countOf, sayFeet, sayInches, sayWeight, wholeNumber, type Units } from './words.ts';

export interface LogTableProps {
  readonly logs: readonly LogGroup[];
  readonly caption: string;
  readonly settings?: ScaleSettings;
  readonly units?: Units;
  /** Buttons or links of a row. */
  readonly action?: (index: number) => ReactNode;
}

const shownRules: readonly LogRule[] = ['internationalQuarter', 'scribnerDecimalC', 'doyle'];

const grossNote = (gross: number, net: number): ReactNode => (net === gross ? null : <span className="block text-xs text-ink-soft">{wholeNumber(gross)} gross</span>);

/** Logs with their scale by all three rules, net of defects, and their weight with bark: the same table wherever logs are listed. Draws on the server as well. */
export function LogTable({ logs, caption, settings = {}, units = 'us', action }: LogTableProps): ReactElement {
  const rows = logs.map((log) => {
    const species = speciesOf(log.species);
    const { boardFeet, netBoardFeet } = estimateLog(log, settings);
    return { log, species, boardFeet, netBoardFeet, weightLb: greenWeightWithBark(log, species) };
  });
  const frameIn = Math.max(0, ...logs.map((log) => log.smallEndIn)) * 1.15;
  const totals = byRule((rule) => rows.reduce((sum, row) => sum + row.netBoardFeet[rule] * row.log.count, 0));
  const weightLb = rows.reduce((sum, row) => sum + row.weightLb * row.log.count, 0);
  return (
    <table className="ruled fold keep-head">
      <caption>{caption}</caption>
      <thead>
        <tr>
          <th scope="col">Log</th>
          {shownRules.map((rule) => <th scope="col" className="num" key={rule}>{logRuleNames[rule]}, bf</th>)}
          <th scope="col" className="num">Green weight</th>
          {action && <th scope="col"><span className="sr-only">Change or remove</span></th>}
        </tr>
      </thead>
      <tbody>
        {rows.map(({ log, species, boardFeet, netBoardFeet, weightLb: each }, index) => (
          <tr key={`${index}-${log.species}`}>
            <th scope="row">
              <span className="flex items-center gap-3">
                <span className="w-12 shrink-0"><LogEnd smallEndIn={log.smallEndIn} seed={`${index}${log.species}`} frameIn={frameIn} sizePx={48} /></span>
                <span>
                  <span className="block font-semibold">{log.count > 1 && <span className="figure">{log.count} × </span>}{species.name}</span>
                  <span className="figure block text-sm text-ink-soft">
                    {sayInches(log.smallEndIn, units)} to {sayInches(largeEndOrTaper(log), units)}{log.largeEndIn === undefined ? ' (assumed)' : ''} × {sayFeet(log.lengthFt, units)}
                    {(log.defects?.length ?? 0) > 0 && ` · ${countOf(log.defects?.length ?? 0, 'defect')}`}
                  </span>
                </span>
              </span>
            </th>
            {shownRules.map((rule) => (
              <td className="num" data-label={logRuleNames[rule]} key={rule}>{wholeNumber(netBoardFeet[rule] * log.count)}{grossNote(boardFeet[rule] * log.count, netBoardFeet[rule] * log.count)}</td>
            ))}
            <td className="num" data-label="Weight">{sayWeight(each * log.count, units)}</td>
            {action && <td className="no-print">{action(index)}</td>}
          </tr>
        ))}
      </tbody>
      <tfoot>
        <tr>
          <th scope="row">{countOf(logs.reduce((sum, log) => sum + log.count, 0), 'log')} together</th>
          {shownRules.map((rule) => <td className="num" data-label={logRuleNames[rule]} key={rule}>{wholeNumber(totals[rule])}</td>)}
          <td className="num" data-label="Weight">{sayWeight(weightLb, units)}</td>
          {action && <td className="no-print" />}
        </tr>
      </tfoot>
    </table>
  );
}
