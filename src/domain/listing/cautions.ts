import { told, type CautionText } from '../cautions.ts';
import { findSpecies, speciesOf } from '../timber/species.ts';
import { seasonCautions } from '../timber/saw-by.ts';

/** What is dangerous here, with the cautions that answer it. */
export interface Danger {
  readonly title: string;
  readonly cautions: readonly CautionText[];
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
  if (howDown === 'uprooted') return { title: 'An uprooted tree', cautions: told('storm', 'bucking', 'distance') };
  return howDown === 'snapped' ? { title: 'A snapped tree', cautions: told('snapped', 'bucking') } : null;
};

export const lineCautions = (lines: string): Danger | null => {
  if (lines === 'down') return { title: 'A line is down', cautions: told('downedLine', 'lines') };
  return lines === 'near' || lines === 'unknown' ? { title: 'Overhead lines', cautions: told('lines') } : null;
};

export const slopeCautions = (slope: string): Danger | null => (slope === 'steep' ? { title: 'Steep ground', cautions: told('slope') } : null);

export const metalCautions = (metalRisk: string): Danger | null =>
  metalRisk === 'lawn-tree' || metalRisk === 'fence-line' || metalRisk === 'known-metal' ? { title: 'Metal in the wood', cautions: told('metal') } : null;

export const dwellingCautions = (forDwelling: boolean): Danger | null => (forDwelling ? { title: 'Lumber for a dwelling', cautions: told('dwelling') } : null);

/** Every danger that the answers speak of, the gravest first. */
export const dangersOf = (answers: DangerousAnswers): readonly Danger[] =>
  [lineCautions(answers.lines), downCautions(answers.howDown), slopeCautions(answers.slope), metalCautions(answers.metalRisk), dwellingCautions(answers.forDwelling)].filter((danger) => danger !== null);

/** What the wood and the season ask of whoever saws and moves it: oak wilt, quarantines, frozen logs, walnut shavings. */
export function woodCautions(species: readonly string[], onDay: string): Danger | null {
  const known = species.filter((code) => findSpecies(code) !== undefined);
  const season = known.flatMap((code) => seasonCautions(code, onDay));
  const walnut = known.some((code) => speciesOf(code).name === 'Black walnut') ? told('walnut') : [];
  const cautions = [...new Set([...season, ...walnut])];
  return cautions.length === 0 ? null : { title: 'This wood and the season', cautions };
}
