import { cubicFeetOf } from './cubic.ts';
import { defectRules, defectShare, type Defect } from './defects.ts';
import type { LogInput } from './estimate.ts';
import { boardFeetByRule, internationalUnroundedBoardFeet, logRuleNames, logRules, scribnerNumbers, type LogRule } from './log-rules.ts';
import { scaleLog, type ScaledLog, type ScaleSegment, type ScaleSettings } from './log-scale.ts';
import { speciesOf } from './species.ts';
import { barkRatio, largeEndOrTaper } from './taper-and-bark.ts';
import { greenWeightRange, greenWeightWithBark, greenWoodWeightLb } from './weight.ts';

/** How one figure came about: shown beside it, for whoever wants to check it with a pencil. */
export interface Working {
  readonly figure: string;
  readonly formula: string;
  readonly numbers: string;
  readonly source: string;
}

const plain = (value: number, decimals: number): string => String(Number(value.toFixed(decimals)));

const sources: Readonly<Record<LogRule, string>> = {
  doyle: 'The rule’s formula, as its published tables print it (an exact half up).',
  scribnerDecimalC: 'US Forest Service, National Volume Estimator Library (factors and 148 printed exceptions); three small cells as the published tables print them.',
  internationalQuarter: 'The rule’s formula, to the nearest 5 as in the published table of E. M. Wengert.',
};

const formulas: Readonly<Record<LogRule, string>> = {
  doyle: '(D − 4)² × L ÷ 16',
  scribnerDecimalC: 'L × the factor for D, to the nearest 10',
  internationalQuarter: '0.905 × (0.22 D² − 0.71 D) for each 4 ft, D growing ½ in a section, to the nearest 5',
};

const cellNumbers = (rule: LogRule, { diameterIn: d, lengthFt: l }: ScaleSegment): string => {
  const cell = boardFeetByRule(rule, d, l);
  if (rule === 'doyle') return `(${d} − 4)² × ${l} ÷ 16 = ${plain(((d - 4) ** 2 * l) / 16, 2)} → ${cell} bf`;
  if (rule === 'internationalQuarter') return `${d} in × ${l} ft: ${plain(internationalUnroundedBoardFeet(d, l), 1)} → ${cell} bf`;
  const { factorBfPerFt, exceptionUnits } = scribnerNumbers(d, l);
  const printed = cell === 5 ? ', printed as 5' : exceptionUnits === 0 ? '' : `, the table prints ${exceptionUnits > 0 ? '10 more' : '10 less'}`;
  return `${l} × ${factorBfPerFt} = ${plain(l * factorBfPerFt, 2)}${printed} → ${cell} bf`;
};

const scaleWorkings = (scaled: ScaledLog): readonly Working[] =>
  logRules.map((rule) => ({
    figure: logRuleNames[rule],
    formula: formulas[rule],
    numbers: scaled.segments.map((segment) => cellNumbers(rule, segment)).join('; ') + (scaled.segments.length > 1 ? `; together ${scaled.boardFeet[rule]} bf` : ''),
    source: sources[rule],
  }));

const defectNumbers = (defect: Defect, scaled: ScaledLog): string =>
  defect.kind === 'squared'
    ? `${defect.widthIn} × ${defect.heightIn} × ${defect.lengthFt} ÷ 15 = ${plain((defect.widthIn * defect.heightIn * defect.lengthFt) / 15, 1)} bf off each rule`
    : `${plain(defectShare(defect, { diameterIn: scaled.scalingDiameterIn, lengthFt: scaled.scalingLengthFt }) * 100, 2)} % off, with D ${scaled.scalingDiameterIn} in and L ${scaled.scalingLengthFt} ft`;

const defectWorkings = (defects: readonly Defect[], scaled: ScaledLog): readonly Working[] =>
  defects.map((defect) => {
    const rule = defectRules[defect.kind];
    return { figure: `Defect: ${rule.name.toLowerCase()}`, formula: rule.formula, numbers: defectNumbers(defect, scaled), source: rule.source };
  });

/** Every figure of one log with its formula, the numbers put in, and its source. */
export function workingsOf(log: LogInput, settings: ScaleSettings = {}): readonly Working[] {
  const scaled = scaleLog(log, settings);
  const species = speciesOf(log.species);
  const large = largeEndOrTaper(log);
  const mean = (log.smallEndIn + large) / 2;
  const cubic = cubicFeetOf(log.smallEndIn, large, log.lengthFt);
  const range = greenWeightRange(log, species);
  const pieces = scaled.segments.map((segment) => `${segment.diameterIn} in × ${segment.lengthFt} ft`).join(' + ');
  return [
    {
      figure: 'Scaling diameter and length',
      formula: 'Small end inside bark to the whole inch, length down to the whole foot; a longer log in pieces',
      numbers: `${plain(log.smallEndIn, 3)} in → ${scaled.scalingDiameterIn} in; ${plain(log.lengthFt, 3)} ft → ${scaled.scalingLengthFt} ft${scaled.segments.length > 1 ? `; scaled as ${pieces}, small end first` : ''}`,
      source: 'Idaho Board of Scaling Practices; pieces of long logs as in the US Forest Service’s volume library.',
    },
    ...scaleWorkings(scaled),
    ...defectWorkings(log.defects ?? [], scaled),
    {
      figure: 'Large end',
      formula: log.largeEndIn === undefined ? 'Small end + ½ in per 4 ft' : 'As measured',
      numbers: `${plain(large, 2)} in inside bark`,
      source: log.largeEndIn === undefined ? 'The taper of the International rule.' : 'Your tape.',
    },
    {
      figure: 'Cubic feet',
      formula: 'Smalian: mean of the end areas × L; Huber: middle area × L; Newton: (small + 4 × middle + large) ÷ 6 × L',
      numbers: `${plain(log.smallEndIn, 2)}, ${plain(mean, 2)} and ${plain(large, 2)} in × ${plain(log.lengthFt, 2)} ft = ${plain(cubic.smalian, 2)}, ${plain(cubic.huber, 2)} and ${plain(cubic.newton, 2)} ft³`,
      source: 'T. E. Avery and H. E. Burkhart, Forest Measurements (from memory).',
    },
    {
      figure: 'Green weight',
      formula: '62.4 × specific gravity × (1 + moisture) × mean area × L, and the bark’s share on top',
      numbers: `62.4 × ${species.specificGravityGreen} × ${plain(1 + species.greenMoisturePct / 100, 4)} = ${plain(species.greenDensityLbPerFt3, 1)} lb/ft³; wood ${plain(greenWoodWeightLb(log, species), 0)} lb + ${species.barkPct} % bark = ${plain(greenWeightWithBark(log, species), 0)} lb; ${range.lowLb} to ${range.highLb} lb: ${range.why}`,
      source: 'USDA FPL Wood Handbook; bark from the Forest Service’s FIA species table, at the weight of the wood (common practice).',
    },
    {
      figure: 'Bark',
      formula: 'Outside bark = inside bark × √(1 + bark’s share of the wood’s volume)',
      numbers: `× ${plain(barkRatio(species), 4)}: large end ${plain(large * barkRatio(species), 1)} in over bark`,
      source: 'Forest Service, FIA species table; one ratio for the whole stem is an approximation.',
    },
  ];
}
