import { speciesRows, type SpeciesRow } from './data/species-table.ts';

/** Shrinkage from green to oven-dry, per cent; null where no figure is published. */
export interface Shrinkage {
  readonly radial: number | null;
  readonly tangential: number | null;
  readonly volumetric: number | null;
}

export interface Species {
  /** `white-oak`: in URLs, files and requests. */
  readonly code: string;
  /** `White oak`: on screens. */
  readonly name: string;
  readonly scientificName: string;
  /** Other names people use. */
  readonly aliases: readonly string[];
  readonly group: 'hardwood' | 'softwood';
  /** Pounds per cubic foot of green wood without bark. */
  readonly greenDensityLbPerFt3: number;
  readonly specificGravityGreen: number;
  readonly greenMoisturePct: number;
  /** Bark in per cent of the wood's volume. */
  readonly barkPct: number;
  readonly shrinkagePct: Shrinkage;
  readonly heartMoisturePct: number | null;
  readonly sapMoisturePct: number | null;
  /** True when the shrinkage figures were written from memory. */
  readonly shrinkageFromMemory: boolean;
}

/** Pounds per cubic foot of wood at a moisture content: 62.4 × specific gravity (at that volume) × (1 + moisture / 100). */
export const woodDensity = (specificGravity: number, moisturePct: number): number => 62.4 * specificGravity * (1 + moisturePct / 100);

const fromRow = (row: SpeciesRow): Species => {
  const [radial, tangential, volumetric] = row.shrinkagePct;
  return {
    code: row.code,
    name: row.source.charAt(0).toUpperCase() + row.source.slice(1),
    scientificName: row.scientificName,
    aliases: row.aliases,
    group: row.inventoryCode < 300 ? 'softwood' : 'hardwood',
    greenDensityLbPerFt3: woodDensity(row.specificGravityGreen, row.greenMoisturePct),
    specificGravityGreen: row.specificGravityGreen,
    greenMoisturePct: row.greenMoisturePct,
    barkPct: row.barkPct,
    shrinkagePct: { radial, tangential, volumetric },
    heartMoisturePct: row.heartMoisturePct,
    sapMoisturePct: row.sapMoisturePct,
    shrinkageFromMemory: row.memory.includes('shrinkage'),
  };
};

/** Every species, in the order of the source. */
export const speciesList: readonly Species[] = speciesRows.map(fromRow);

/** Every code, for schemas and checks. */
export const speciesCodes: readonly string[] = speciesList.map(({ code }) => code);

const byCode: ReadonlyMap<string, Species> = new Map(speciesList.map((species) => [species.code, species]));

/** The species of a code, or undefined. */
export const findSpecies = (code: string): Species | undefined => byCode.get(code);

/**
 * The species of a code that is known to be valid.
 * @throws RangeError for any other; check input with `findSpecies` first.
 */
export function speciesOf(code: string): Species {
  const species = byCode.get(code);
  if (!species) throw new RangeError(`There is no species "${code}".`);
  return species;
}

const plain = (text: string): string =>
  text
    .toLowerCase()
    .normalize('NFKD')
    .replace(/[^a-z]+/g, ' ')
    .trim();

const words = (species: Species): readonly string[] => [species.name, species.scientificName, ...species.aliases, species.code].map(plain);

const searchTable: readonly { readonly species: Species; readonly names: readonly string[] }[] = speciesList.map((species) => ({ species, names: words(species) }));

/** 0 is the best match; null is none. Whole name, then its own name that begins so, then another that does, then all typed words begin a word of one name. */
const rank = (names: readonly string[], typed: string): number | null => {
  if (names.includes(typed)) return names[0] === typed ? 0 : 1;
  if (names[0]?.startsWith(typed)) return 2;
  if (names.some((name) => name.startsWith(typed))) return 3;
  const parts = typed.split(' ');
  const allBegin = names.some((name) => parts.every((part) => name.split(' ').some((word) => word.startsWith(part))));
  if (allBegin) return 4;
  return names.some((name) => name.replaceAll(' ', '').includes(typed.replaceAll(' ', ''))) ? 5 : null;
};

/** Species whose common name, scientific name or other names match what was typed, best first; all of them for an empty text. */
export function searchSpecies(typed: string): readonly Species[] {
  const wanted = plain(typed);
  if (wanted === '') return speciesList;
  return searchTable
    .map(({ species, names }) => ({ species, order: rank(names, wanted) }))
    .filter((found): found is { species: Species; order: number } => found.order !== null)
    .sort((a, b) => a.order - b.order || a.species.name.localeCompare(b.species.name, 'en'))
    .map(({ species }) => species);
}

/** The one species a person means (its code, its name, its scientific name, or another name that only one species has); else undefined. */
export function matchSpecies(typed: string): Species | undefined {
  const wanted = plain(typed);
  const exact = searchTable.filter(({ species, names }) => species.code === typed.trim().toLowerCase() || names.includes(wanted));
  const own = exact.find(({ species, names }) => species.code === typed.trim().toLowerCase() || names[0] === wanted || names[1] === wanted);
  return own?.species ?? (exact.length === 1 ? exact[0]?.species : undefined);
}
