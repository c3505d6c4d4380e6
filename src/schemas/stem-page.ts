import { blankPiece, isBlankPiece, type PieceTyped } from '~/domain/listing/draft.ts';
import { readPieceRow } from '~/domain/listing/rows.ts';
import { parseLengthFt, parseLengthIn } from '~/domain/measure.ts';
import type { Problem, Result } from '~/domain/result.ts';
import type { BuckingRules, Stem } from '~/domain/sawing/bucking.ts';
import { type SawnPiece, sawnPieces } from '~/domain/sawing/sawn-piece.ts';
import type { StemWorth } from '~/domain/sawing/stem-plan.ts';
import { logRules } from '~/domain/timber/log-rules.ts';
import { findSpecies, type Species } from '~/domain/timber/species.ts';
import { insideBarkIn } from '~/domain/timber/taper-and-bark.ts';

/** Rows of the form: places measured along the stem, and stretches that no log may hold. */
export const MEASURES = 8;
export const STRETCHES = 3;
/** Rows of a cut list that the stem may be cut for. */
export const PIECES = 6;
/** Lengths that may be chosen, ft. */
export const LOG_LENGTHS_FT: readonly number[] = [6, 8, 10, 12, 14, 16, 18, 20];
/** Trim over the length, in: common practice is 4 to 6. */
export const TRIM_IN: readonly number[] = [3, 4, 5, 6, 8];
const LONGEST_STEM_FT = 150;
/** Planned by boards or for a list a longer stem takes too long. */
const LONGEST_PLANNED_FT = 100;

export interface StemAsked {
  readonly species: Species;
  readonly stem: Stem;
  readonly rules: BuckingRules;
  /** What the logs shall give most of, or a cut list. */
  readonly by: StemWorth | 'list';
  /** The cut list; empty unless the stem is cut for it. */
  readonly pieces: readonly SawnPiece[];
}

export interface StemPage {
  /** Null while something is missing or wrong. */
  readonly asked: StemAsked | null;
  readonly problems: readonly Problem[];
  /** The fields as typed, or as they stand at first. */
  readonly said: (name: string) => string;
  readonly lengths: readonly string[];
}

const worths: readonly StemAsked['by'][] = [...logRules, 'boards', 'list'];

/** The fields of a row of the cut list, as they are named in the address: `p0-thickness`. */
export const pieceFields = ['label', 'thickness', 'width', 'length', 'count', 'sizing', 'kind'] as const;

const first: Readonly<Record<string, string>> = { bark: 'over', trim: '5', smallest: '8', by: 'internationalQuarter', at0: '0' };
const firstLengths = ['8', '10', '12', '16'];

/** Reads the address of the page. A page nobody has filled in has neither a plan nor a problem. */
export function readStemPage(params: URLSearchParams): StemPage {
  const asking = params.has('species');
  const said = (name: string): string => (asking ? (params.get(name) ?? '').trim().slice(0, 100) : (first[name] ?? ''));
  const lengths = asking ? params.getAll('lengths') : firstLengths;
  if (!asking) return { asked: null, problems: [], said, lengths };
  const reader = new Reader(said);
  const species = reader.species();
  const stem = reader.stem(species);
  const rules = reader.rules(lengths);
  const by = worths.find((one) => one === said('by'));
  if (!by) reader.say('by', 'Choose what the logs shall give most of.');
  if ((by === 'boards' || by === 'list') && stem?.measures.some(({ fromButtFt }) => fromButtFt > LONGEST_PLANNED_FT)) reader.say('by', `${by === 'list' ? 'For a list' : 'By its boards'} a stem is worked out up to ${LONGEST_PLANNED_FT} ft. Choose a log rule for a longer one.`);
  const pieces = by === 'list' ? reader.pieces() : [];
  const asked = species && stem && rules && by && reader.problems.length === 0 ? { species, stem, rules, by, pieces } : null;
  return { asked, problems: reader.problems, said, lengths };
}

class Reader {
  readonly problems: Problem[] = [];
  constructor(private readonly said: (name: string) => string) {}

  say(path: string, message: string): null {
    this.problems.push({ path, message });
    return null;
  }

  private read(name: string, parse: (text: string) => Result<number>, least: number, most: number, words: string): number | null {
    const read = parse(this.said(name));
    if (!read.ok) return this.say(name, read.problems[0]?.message ?? words);
    return read.value >= least - 1e-9 && read.value <= most + 1e-9 ? read.value : this.say(name, words);
  }

  private feet(name: string): number | null {
    return this.read(name, (text) => parseLengthFt(text), 0, LONGEST_STEM_FT, `A place along the stem is from 0 to ${LONGEST_STEM_FT} ft from the butt.`);
  }

  species(): Species | null {
    return findSpecies(this.said('species')) ?? this.say('species', 'Choose the species: its bark and weight depend on it.');
  }

  stem(species: Species | null): Stem | null {
    const over = this.said('bark') !== 'inside';
    const rows = Array.from({ length: MEASURES }, (_, index) => index).filter((index) => this.said(`at${index}`) !== '' || this.said(`across${index}`) !== '');
    const measures = rows.flatMap((index) => {
      // The first place stands in the form before anything is typed.
      if (this.said(`across${index}`) === '') return (this.say(`across${index}`, `Write the diameter at ${this.said(`at${index}`)} ft, or empty the row.`), []);
      const fromButtFt = this.said(`at${index}`) === '' ? this.say(`at${index}`, 'Write how far from the butt this diameter was measured.') : this.feet(`at${index}`);
      const across = this.read(`across${index}`, (text) => parseLengthIn(text), 2, 60, 'A diameter is between 2 and 60 in.');
      return fromButtFt === null || across === null ? [] : [{ fromButtFt, diameterIn: over && species ? insideBarkIn(across, species) : across, index }];
    });
    const places = [...measures].sort((a, b) => a.fromButtFt - b.fromButtFt);
    places.forEach((place, order) => {
      const before = places[order - 1];
      if (before && before.fromButtFt === place.fromButtFt) this.say(`at${Math.max(place.index, before.index)}`, 'Two diameters at one place. Keep one, or write their mean.');
      else if (before && before.diameterIn < place.diameterIn) this.say(`across${place.index}`, 'The stem is thicker here than nearer the butt. Measure again, away from a branch or a swelling.');
    });
    if (rows.length < 2) this.say(`across${rows.length === 0 ? 0 : 1}`, 'Measure the stem at two places at least: at the butt and at the top.');
    return { measures: measures.map(({ fromButtFt, diameterIn }) => ({ fromButtFt, diameterIn })), leaveOut: this.leaveOut() };
  }

  private leaveOut(): { readonly fromFt: number; readonly toFt: number }[] {
    return Array.from({ length: STRETCHES }, (_, index) => index).flatMap((index) => {
      if (this.said(`from${index}`) === '' && this.said(`to${index}`) === '') return [];
      const [fromFt, toFt] = [this.feet(`from${index}`), this.feet(`to${index}`)];
      if (fromFt === null || toFt === null) return [];
      if (toFt <= fromFt) return (this.say(`to${index}`, 'This stretch ends before it begins.'), []);
      return [{ fromFt, toFt }];
    });
  }

  /** The rows of the cut list in which anything was typed. */
  pieces(): SawnPiece[] {
    const rows = Array.from({ length: PIECES }, (_, index) => ({ index, typed: Object.fromEntries(pieceFields.map((name) => [name, this.said(`p${index}-${name}`)])) as Partial<PieceTyped> }))
      .map(({ index, typed }) => ({ index, typed: { ...blankPiece(), ...typed } }))
      .filter(({ typed }) => !isBlankPiece(typed));
    if (rows.length === 0) this.say('p0-thickness', 'Write at least one size that the stem shall give.');
    return sawnPieces(rows.flatMap(({ index, typed }) => {
      const read = readPieceRow(typed);
      if (read.ok) return [read.value];
      for (const { path, message } of read.problems) this.say(`p${index}-${path}`, message);
      return [];
    }));
  }

  rules(typed: readonly string[]): BuckingRules | null {
    const lengthsFt = LOG_LENGTHS_FT.filter((feet) => typed.includes(String(feet)));
    if (lengthsFt.length === 0) this.say('lengths', 'Choose at least one length.');
    const trimIn = TRIM_IN.find((inches) => String(inches) === this.said('trim'));
    if (trimIn === undefined) this.say('trim', 'Choose the trim.');
    const longestFt = this.said('longest') === '' ? undefined : this.read('longest', (text) => parseLengthFt(text), 4, 60, 'The longest log that a mill takes is between 4 and 60 ft.');
    const shortestEndIn = this.read('smallest', (text) => parseLengthIn(text), 4, 60, 'The smallest end is between 4 and 60 in.');
    if (trimIn === undefined || longestFt === null || shortestEndIn === null) return null;
    return { lengthsFt, trimIn, longestFt, shortestEndIn };
  }
}
