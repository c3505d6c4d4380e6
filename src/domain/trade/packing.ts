import type { MillKind } from './mill-fit.ts';

/** A stop as packing for it is thought of. */
export interface StopToPackFor {
  readonly metalRisk: string;
  /** Expected lumber. */
  readonly boardFeet: number;
  readonly millKind: MillKind;
  readonly water: boolean;
  readonly machine: boolean;
  readonly offBearer: 'sawyer-brings' | 'landowner-provides';
  readonly stickers: number;
}

export interface PackedItem {
  readonly item: string;
  readonly why: string;
}

/** One sharp band for about so many board feet of clean logs: common practice, no source. */
export const BF_PER_BLADE = 500;

/** Spares beside, by what is known of metal: common practice, no source. An unknown risk is packed for like a yard tree. */
export const SPARE_BLADES: Readonly<Record<string, number>> = { 'none-known': 1, unknown: 2, 'lawn-tree': 2, 'fence-line': 3, 'known-metal': 4 };

const cutters: Readonly<Record<MillKind, string>> = { band: 'bands', 'swing-blade': 'sets of teeth', chainsaw: 'chains', circular: 'sets of teeth' };

/** Blades for one stop: those that wear, and spares for its metal risk. */
export const bladesFor = ({ boardFeet, metalRisk }: Pick<StopToPackFor, 'boardFeet' | 'metalRisk'>): number => Math.max(1, Math.ceil(boardFeet / BF_PER_BLADE)) + (SPARE_BLADES[metalRisk] ?? 2);

/** What to pack for a day's stops: blades by wood and metal risk first, then what a landing lacks. Empty for a day without stops. */
export function packingList(stops: readonly StopToPackFor[]): readonly PackedItem[] {
  const kinds = [...new Set(stops.map(({ millKind }) => millKind))];
  const blades = kinds.map((kind): PackedItem => {
    const here = stops.filter(({ millKind }) => millKind === kind);
    const count = here.reduce((sum, stop) => sum + bladesFor(stop), 0);
    const spare = here.reduce((sum, { metalRisk }) => sum + (SPARE_BLADES[metalRisk] ?? 2), 0);
    return { item: `${count} sharp ${cutters[kind]}`, why: `${Math.round(here.reduce((sum, { boardFeet }) => sum + boardFeet, 0)).toLocaleString('en-US')} bf, with ${spare} to spare for metal` };
  });
  const stickers = stops.reduce((sum, stop) => sum + stop.stickers, 0);
  const some = (wanted: (stop: StopToPackFor) => boolean): boolean => stops.some(wanted);
  return [
    ...blades,
    ...(some(({ metalRisk }) => metalRisk !== 'none-known') ? [{ item: 'Metal detector', why: 'metal is likely, known or not ruled out' }] : []),
    ...(some(({ water }) => !water) ? [{ item: 'Water for the blade', why: 'none at a landing' }] : []),
    ...(some(({ machine }) => !machine) ? [{ item: 'Cant hook, ramps and winch', why: 'no machine at a landing' }] : []),
    ...(some(({ offBearer }) => offBearer === 'sawyer-brings') ? [{ item: 'Your off-bearer', why: 'agreed that you bring one' }] : []),
    ...(stickers > 0 ? [{ item: `${stickers.toLocaleString('en-US')} stickers`, why: 'agreed' }] : []),
    ...(stops.length > 0 ? [{ item: 'Eye, ear and dust protection, first-aid kit', why: 'every day' }, { item: 'Tally book or a charged phone', why: 'boards are tallied as they come off' }] : []),
  ];
}
