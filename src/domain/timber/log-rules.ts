import { scribnerExceptions, scribnerFactorFrom16Ft, scribnerFactorFrom32Ft, scribnerFactorThousandths } from './data/scribner-table.ts';

/** The three log rules. A board-foot figure is never shown without the name of its rule. */
export type LogRule = 'doyle' | 'scribnerDecimalC' | 'internationalQuarter';

export const logRules: readonly LogRule[] = ['doyle', 'scribnerDecimalC', 'internationalQuarter'];

export const logRuleNames: Readonly<Record<LogRule, string>> = {
  doyle: 'Doyle',
  scribnerDecimalC: 'Scribner Decimal C',
  internationalQuarter: 'International ¼',
};

/** One figure for each rule. */
export type ByRule = Readonly<Record<LogRule, number>>;

/** Doyle, (D − 4)² × L / 16, an exact half up. Whole inches and whole feet. Source: the rule's formula, as its tables print it. */
export const doyleBoardFeet = (diameterIn: number, lengthFt: number): number =>
  diameterIn <= 4 ? 0 : Math.floor(((diameterIn - 4) ** 2 * lengthFt + 8) / 16);

const scribnerFactor = (diameterIn: number, lengthFt: number): number => {
  const short = scribnerFactorThousandths[diameterIn];
  if (short === undefined) throw new RangeError(`Scribner Decimal C has no ${diameterIn} in.`);
  if (lengthFt >= 32) return scribnerFactorFrom32Ft[diameterIn] ?? short;
  if (lengthFt >= 16) return scribnerFactorFrom16Ft[diameterIn] ?? short;
  return short;
};

const scribnerException = (diameterIn: number, lengthFt: number): number => {
  const exception = scribnerExceptions[lengthFt];
  return exception?.above.includes(diameterIn) ? 1 : exception?.below.includes(diameterIn) ? -1 : 0;
};

/**
 * Scribner Decimal C in board feet (tens): floor((length × factor + 5) / 10) units, plus the exception of the cell.
 * Source: US Forest Service, National Volume Estimator Library, `scrib.f`.
 * Three cells differ between the sources: 6 in × 6 ft, 6 in × 8 ft and 7 in × 6 ft are 10 bf by the factors and are printed
 * as 5 bf (half a unit) in the published tables; the print is followed.
 * @throws RangeError above 120 in.
 */
export function scribnerDecimalCBoardFeet(diameterIn: number, lengthFt: number): number {
  if ((diameterIn === 6 && (lengthFt === 6 || lengthFt === 8)) || (diameterIn === 7 && lengthFt === 6)) return 5;
  const units = Math.floor((lengthFt * scribnerFactor(diameterIn, lengthFt) + 5000) / 10_000) + scribnerException(diameterIn, lengthFt);
  return Math.max(0, units) * 10;
}

/** The numbers behind a Scribner cell, for showing how it is worked out: board feet per foot, and units the print adds or takes. */
export const scribnerNumbers = (diameterIn: number, lengthFt: number): { readonly factorBfPerFt: number; readonly exceptionUnits: number } => ({
  factorBfPerFt: scribnerFactor(diameterIn, lengthFt) / 1000,
  exceptionUnits: scribnerException(diameterIn, lengthFt),
});

/** Millionths of a board foot in a 4-ft section of `halfInches`/2 in: 0.905 × (0.22 D² − 0.71 D), in whole numbers. */
const internationalSection = (halfInches: number): number => 905 * (55 * halfInches ** 2 - 355 * halfInches);

/** Cells that the published table prints 5 bf above what the formula gives (157.3 and 177.4): diameter × length. */
const internationalPrinted: Readonly<Record<string, number>> = { '15x16': 160, '17x14': 180 };

const internationalQuarterMillionths = (diameterIn: number, lengthFt: number): number => {
  const sections = Math.floor(lengthFt / 4);
  let quarterMillionths = (lengthFt % 4) * internationalSection(2 * diameterIn + sections);
  for (let section = 0; section < sections; section += 1) quarterMillionths += 4 * internationalSection(2 * diameterIn + section);
  return quarterMillionths;
};

/** International 1/4-inch before its table rounds it, board feet: for showing how a cell is worked out. */
export const internationalUnroundedBoardFeet = (diameterIn: number, lengthFt: number): number => internationalQuarterMillionths(diameterIn, lengthFt) / 4_000_000;

/**
 * International 1/4-inch as its table prints it, to the nearest 5 bf.
 * A 4-ft section gives 0.905 (0.22 D² − 0.71 D); the diameter grows half an inch per 4 ft; a length between multiples of 4 ft
 * is interpolated between its neighbours. Source: the rule's formula (Michigan Compiled Laws 290.401 prints the factor as
 * 0.904762) and the published table of E. M. Wengert, whose two odd cells are followed.
 */
export function internationalQuarterBoardFeet(diameterIn: number, lengthFt: number): number {
  const printed = internationalPrinted[`${diameterIn}x${lengthFt}`];
  if (printed !== undefined) return printed;
  return Math.max(0, Math.floor(internationalQuarterMillionths(diameterIn, lengthFt) / 20_000_000 + 0.5) * 5);
}

const ruleFunctions: Readonly<Record<LogRule, (diameterIn: number, lengthFt: number) => number>> = {
  doyle: doyleBoardFeet,
  scribnerDecimalC: scribnerDecimalCBoardFeet,
  internationalQuarter: internationalQuarterBoardFeet,
};

/** The cell of a rule's table. `diameterIn` is the scaling diameter in whole inches, `lengthFt` whole feet. */
export const boardFeetByRule = (rule: LogRule, diameterIn: number, lengthFt: number): number => ruleFunctions[rule](diameterIn, lengthFt);

/** To what each rule's table is rounded, in board feet. */
export const ruleStep: ByRule = { doyle: 1, scribnerDecimalC: 10, internationalQuarter: 5 };

/** Builds one figure for each rule. */
export const byRule = (figure: (rule: LogRule) => number): ByRule => ({
  doyle: figure('doyle'),
  scribnerDecimalC: figure('scribnerDecimalC'),
  internationalQuarter: figure('internationalQuarter'),
});

/** Why the three figures of one log differ, in one sentence for the page. */
export const whyRulesDiffer =
  'Doyle takes off a fixed 4 inches for slabs and so reads low on small logs, Scribner was drawn on paper with a wide kerf and no taper, and International ¼ allows for taper and a thin kerf, so it comes nearest to what a band mill saws.';
