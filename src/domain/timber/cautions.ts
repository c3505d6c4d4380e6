/** Cautions stand beside an action, never instead of it. Plain words, a source, and what comes first. */
export interface Caution {
  readonly text: string;
  readonly source: string;
}

export type CautionTopic = 'felling' | 'bucking' | 'lines' | 'loading' | 'mill' | 'moving' | 'oakWilt' | 'shavings' | 'building';

const memory = 'usual practice; check the rule that applies to you';

const cautions: Readonly<Record<CautionTopic, readonly Caution[]>> = {
  felling: [
    { text: 'Hire a licensed or trained professional to fell a tree, above all one that leans, is lodged, split or wind-thrown, or stands near a house or a line.', source: memory },
    { text: 'Keep everybody else at least two tree lengths away until the feller says it is safe.', source: '29 CFR 1910.266(d)(6) and (h)(1)' },
    { text: 'Never work under a lodged tree; have it brought down first.', source: `29 CFR 1910.266(h)(1), ${memory}` },
    { text: 'A height measured from the ground is an estimate. Ground that slopes, a tree that leans and a top that breaks off all carry further.', source: memory },
  ],
  bucking: [
    { text: 'Look where the wood is bent or loaded before each cut, and stand uphill of a log that could roll.', source: `29 CFR 1910.266(h)(3), ${memory}` },
    { text: 'Uprooted trees can spring back onto their hole when the stem is cut: leave them to a trained feller.', source: memory },
  ],
  lines: [
    { text: 'Stay at least 10 ft from any overhead line, more for high voltage, and treat a downed line as live. Call the utility first.', source: `29 CFR 1910.333(c)(3), ${memory}` },
  ],
  loading: [
    { text: 'Ask for the loader’s rating at the load’s centre, not at the pins, and keep a margin: green logs weigh more than they look.', source: memory },
    { text: 'Tie-downs together must be rated for at least half the weight of the load; stand clear of logs that can roll.', source: `49 CFR 393.106(d), ${memory}` },
  ],
  mill: [
    { text: 'Nobody under 18 helps at the mill. Keep clear of the blade’s line, wear eye and ear protection, and follow the mill’s manual.', source: `29 CFR 1910.265, ${memory}` },
    { text: 'Trees from yards and fence lines hide nails, wire and stone: search them with a metal detector before sawing.', source: memory },
  ],
  moving: [
    { text: 'Quarantines may forbid moving logs, bark and firewood. Ask your state’s agriculture department; sawing on site usually avoids the question.', source: 'state quarantine orders; the federal one for emerald ash borer ended on 14 January 2021 (85 FR 81085)' },
  ],
  oakWilt: [
    { text: 'Oaks cut or wounded in spring and early summer spread oak wilt: seal stumps and wounds, keep the bark from other oaks, and ask your state’s forestry office for the safe months.', source: memory },
  ],
  shavings: [{ text: 'Walnut shavings and stall boards make horses founder: keep them out of stables.', source: memory }],
  building: [{ text: 'Lumber for a dwelling needs the grade stamp or certification that your local code asks for. Ask the building office before you saw.', source: memory }],
};

/** The cautions for what somebody is about to do. */
export const cautionsFor = (...topics: readonly CautionTopic[]): readonly Caution[] => topics.flatMap((topic) => cautions[topic]);
