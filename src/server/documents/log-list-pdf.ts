import { byRule, logRuleNames, whyRulesDiffer, type LogRule } from '~/domain/timber/log-rules.ts';
import { estimateLog, estimateRange } from '~/domain/timber/estimate.ts';
import { eachLog, type LogGroup } from '~/domain/timber/logs-in-url.ts';
import type { ScaleSettings } from '~/domain/timber/log-scale.ts';
import { speciesOf } from '~/domain/timber/species.ts';
import { largeEndOrTaper } from '~/domain/timber/taper-and-bark.ts';
import { greenWeightWithBark } from '~/domain/timber/weight.ts';
import { formatFeet, formatFraction } from '~/domain/measure.ts';
import { openPaper } from './paper.ts';

const rules: readonly LogRule[] = ['internationalQuarter', 'scribnerDecimalC', 'doyle'];

/** Left edge, width and alignment of the columns on a Letter page with ¾-inch margins, points. */
const columns = [
  { heading: 'Log', x: 54, width: 218, align: 'left' },
  { heading: 'Intl ¼', x: 276, width: 64, align: 'right' },
  { heading: 'Scribner', x: 344, width: 64, align: 'right' },
  { heading: 'Doyle', x: 412, width: 56, align: 'right' },
  { heading: 'Weight, lb', x: 472, width: 86, align: 'right' },
] as const;

const whole = (value: number): string => Math.round(value).toLocaleString('en-US');

const describe = (log: LogGroup): string => {
  const defects = log.defects?.length ?? 0;
  const measures = `${formatFraction(log.smallEndIn)} to ${formatFraction(largeEndOrTaper(log))} in × ${formatFeet(log.lengthFt)}`;
  return `${log.count > 1 ? `${log.count} × ` : ''}${speciesOf(log.species).name}, ${measures}${defects > 0 ? `, ${defects === 1 ? 'one defect' : `${defects} defects`}` : ''}`;
};

/** A list of logs with its figures as a PDF: net board feet by three rules, green weight with bark, and the range. */
export function logListPdf(logs: readonly LogGroup[], settings: ScaleSettings, origin: string): Promise<Uint8Array<ArrayBuffer>> {
  const { paper: sheet, done } = openPaper('Log estimate');

  const row = (texts: readonly string[], bold: boolean): void => {
    sheet.font(bold ? 'bold' : 'plain').fontSize(9.5);
    const tall = Math.max(...columns.map((column, index) => sheet.heightOfString(texts[index] ?? '', { width: column.width })));
    if (sheet.y + tall > sheet.page.height - 80) {
      sheet.addPage();
      row(columns.map(({ heading }) => heading), true);
      sheet.font(bold ? 'bold' : 'plain').fontSize(9.5);
    }
    const top = sheet.y;
    columns.forEach((column, index) => sheet.text(texts[index] ?? '', column.x, top, { width: column.width, align: column.align }));
    const foot = top + tall + 3;
    sheet.moveTo(54, foot).lineTo(558, foot).lineWidth(bold ? 1 : 0.4).stroke();
    sheet.x = 54;
    sheet.y = foot + 5;
  };

  sheet.font('bold').fontSize(20).text('Log estimate');
  sheet.moveDown(0.4).font('plain').fontSize(9.5).text('Board feet are net of defects. Diameters inside bark, small end to large end. Weights are green, with bark.');
  sheet.moveDown(0.8);
  row(columns.map(({ heading }) => heading), true);
  const figures = logs.map((log) => ({ log, net: estimateLog(log, settings).netBoardFeet, weightLb: greenWeightWithBark(log, speciesOf(log.species)) }));
  for (const { log, net, weightLb } of figures) row([describe(log), ...rules.map((rule) => whole(net[rule] * log.count)), whole(weightLb * log.count)], false);
  const totals = byRule((rule) => figures.reduce((sum, { log, net }) => sum + net[rule] * log.count, 0));
  const count = logs.reduce((sum, log) => sum + log.count, 0);
  row([`${whole(count)} ${count === 1 ? 'log' : 'logs'} together`, ...rules.map((rule) => whole(totals[rule])), whole(figures.reduce((sum, { log, weightLb }) => sum + weightLb * log.count, 0))], true);

  const { low, high } = estimateRange({ ...settings, logs: eachLog(logs) }, 'landowner');
  const ranges = rules.map((rule) => `${whole(low.netBoardFeet[rule])} to ${whole(high.netBoardFeet[rule])} bf ${logRuleNames[rule]}`).join(', ');
  sheet.moveDown(0.6).font('plain').fontSize(9.5);
  sheet.text(`Measured by a landowner: ${ranges} (every diameter an inch less to half an inch more).`, 54, sheet.y, { width: 504 });
  sheet.moveDown(0.5).text(whyRulesDiffer);
  sheet.moveDown(0.5).text(`An exact half inch goes ${settings.halfInchRounding ?? 'up'}; logs longer than ${settings.longestScalingLengthFt ?? 20} ft are scaled in pieces. An estimate, not a scaling ticket. Green logs roll and crush: lift, load and saw them by the equipment’s manual, with trained help.`);
  sheet.moveDown(0.5).fillColor('#1B559B').text(`${origin}/estimator`, { link: `${origin}/estimator` });
  sheet.end();
  return done;
}
