import { cautionsFor, type Caution } from '../timber/cautions.ts';
import { findSpecies, speciesOf } from '../timber/species.ts';
import { seasonCautions } from '../timber/saw-by.ts';

const memory = 'usual practice; check the rule that applies to you';

/** What is dangerous here, with the cautions that answer it. */
export interface Danger {
  readonly title: string;
  readonly cautions: readonly Caution[];
}

/** The answers that say what is dangerous. An empty text is a question not answered yet. */
export interface DangerousAnswers {
  readonly howDown: string;
  readonly lines: string;
  readonly slope: string;
  readonly metalRisk: string;
  readonly forDwelling: boolean;
}

/** A stem that broke or tore out is under tension wherever it is cut. */
export const downCautions = (howDown: string): Danger | null => {
  if (howDown === 'uprooted') return { title: 'An uprooted tree', cautions: cautionsFor('bucking', 'felling').filter(({ text }) => !text.startsWith('A height')) };
  if (howDown === 'snapped') {
    const split: Caution = { text: 'A snapped stem is bent and loaded, and may be split far below the break. Have it freed and cut to length by a trained professional.', source: memory };
    return { title: 'A snapped tree', cautions: [split, ...cautionsFor('bucking').slice(0, 1)] };
  }
  return null;
};

export const lineCautions = (lines: string): Danger | null => {
  if (lines === 'down') return { title: 'A line is down', cautions: [{ text: 'Stay away from the tree, the logs and anything that touches the line, and call the utility. Nobody works here until they say it is safe.', source: memory }, ...cautionsFor('lines')] };
  return lines === 'near' || lines === 'unknown' ? { title: 'Overhead lines', cautions: cautionsFor('lines') } : null;
};

export const slopeCautions = (slope: string): Danger | null =>
  slope === 'steep'
    ? { title: 'Steep ground', cautions: [{ text: 'Logs roll and slide. Chock each one, work from above or the side, and let nobody stand below. A mill and a trailer need level ground.', source: memory }] }
    : null;

export const metalCautions = (metalRisk: string): Danger | null =>
  metalRisk === 'lawn-tree' || metalRisk === 'fence-line' || metalRisk === 'known-metal' ? { title: 'Metal in the wood', cautions: cautionsFor('mill').slice(1) } : null;

export const dwellingCautions = (forDwelling: boolean): Danger | null => (forDwelling ? { title: 'Lumber for a dwelling', cautions: cautionsFor('building') } : null);

/** Every danger that the answers speak of, the gravest first. */
export const dangersOf = (answers: DangerousAnswers): readonly Danger[] =>
  [lineCautions(answers.lines), downCautions(answers.howDown), slopeCautions(answers.slope), metalCautions(answers.metalRisk), dwellingCautions(answers.forDwelling)].filter((danger) => danger !== null);

/** What the wood and the season ask of whoever saws and moves it: oak wilt, quarantines, frozen logs, walnut shavings. */
export function woodCautions(species: readonly string[], onDay: string): Danger | null {
  const known = species.filter((code) => findSpecies(code) !== undefined);
  const season = known.flatMap((code) => seasonCautions(code, onDay));
  const walnut = known.some((code) => speciesOf(code).name === 'Black walnut') ? cautionsFor('shavings') : [];
  const cautions = [...new Map([...season, ...walnut].map((caution) => [caution.text, caution])).values()];
  return cautions.length === 0 ? null : { title: 'This wood and the season', cautions };
}
