import { formatFeetInches } from '../measure.ts';
import { machines, metalRisks, overheadLines, reDeckers, saidOf, sawdustEnds, slabEnds, slopes, trucks, water, waysDown, type Access, type Landing, type Waste } from './answers.ts';

export interface Said {
  readonly label: string;
  readonly value: string;
  readonly note?: string | undefined;
  readonly words: true;
}

const say = (label: string, value: string, note = ''): Said => ({ label, value: value.charAt(0).toUpperCase() + value.slice(1), ...(note === '' ? {} : { note }), words: true });

/** The tree, in the words of the page. */
export const treeSaid = (listing: { readonly howDown: string; readonly endsSealed: boolean; readonly metalRisk: string; readonly metalNote: string }, cameDown: string): readonly Said[] => [
  say('How it came down', saidOf(waysDown, listing.howDown)),
  say('When', cameDown),
  say('Log ends', listing.endsSealed ? 'sealed' : 'not sealed'),
  say('Metal', saidOf(metalRisks, listing.metalRisk), listing.metalNote),
];

export const accessSaid = (access: Access): readonly Said[] => [
  say('Truck', saidOf(trucks, access.truck)),
  say('Narrowest gate', access.gateWidthIn === null ? 'none given' : formatFeetInches(access.gateWidthIn)),
  say('Ground', saidOf(slopes, access.slope)),
  say('Lines', saidOf(overheadLines, access.lines)),
  say('Machine', saidOf(machines, access.machine), access.machineNote),
  say('Water', saidOf(water, access.water)),
  say('Adult helpers', access.helpers === 0 ? 'none' : String(access.helpers)),
];

export const landingSaid = (landing: Landing, waste: Waste): readonly Said[] => [
  say('Level, firm pad of about 30 × 30 ft', landing.pad ? 'yes' : 'no'),
  say('Logs off the dirt', landing.offDirt ? 'yes' : 'no'),
  say('Logs side by side', landing.parallel ? 'yes' : 'no'),
  say('Within rolling distance', landing.rolling ? 'yes' : 'no'),
  say('Moving the logs', saidOf(reDeckers, landing.reDecks)),
  say('Slabs', saidOf(slabEnds, waste.slabs)),
  say('Sawdust', saidOf(sawdustEnds, waste.sawdust)),
  ...(landing.note === '' ? [] : [say('About the landing', '', landing.note)]),
];
