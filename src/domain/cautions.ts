/**
 * The cautions of the trade, each said once, to stand beside the action it belongs to.
 * `source` names a document whose words were read; without one the caution is usual practice, and `lookUp` names the rule
 * or office that decides for the reader.
 */
export interface CautionText {
  readonly title: string;
  readonly text: string;
  readonly source?: string;
  readonly lookUp?: string;
}

export const cautions = {
  felling: {
    title: 'Hire a professional to fell a tree.',
    text: 'Hire a licensed or trained professional, above all for a tree that leans, is lodged, split or wind-thrown, or stands near a house or a line.',
  },
  height: {
    title: 'A height is an estimate.',
    text: 'Measured from the ground it is never exact. Ground that slopes, a tree that leans and a top that breaks off all carry further.',
  },
  distance: {
    title: 'Two tree lengths from anyone felling.',
    text: 'Keep all other work at least two tree lengths away. Nobody walks up to a person felling, closer than two tree lengths, until that person says it is safe. No machine pulls logs inside that circle.',
    source: 'OSHA directive CPL 2-1.19 on 29 CFR 1910.266, logging',
  },
  undercut: {
    title: 'An undercut, a hinge and a higher back cut.',
    text: 'Each tree gets an undercut unless it can be shown safe without, then a back cut that leaves hinge wood to guide the fall. The back cut stands above the level cut of the notch, except with an open-face notch.',
    source: 'OSHA amendment of 29 CFR 1910.266, 60 FR 47022 (8 September 1995)',
  },
  notch: {
    title: 'How deep a notch goes.',
    text: 'A conventional notch is about a third of the diameter deep, its second cut at 45 degrees, and opens about 2½ inches for each foot of diameter. This is a description, not a lesson: felling is learned beside a trained person.',
    source: 'US Army safety manual EM 385-1-1, chapter 31, as quoted in a public compilation',
  },
  retreat: {
    title: 'A way out before the first cut.',
    text: 'Plan and clear a path back from the fall, at about 45 degrees behind the line of it, before the saw starts.',
    lookUp: '29 CFR 1910.266(h)(2)',
  },
  storm: {
    title: 'Wind-thrown, leaning and hung-up trees are for professionals.',
    text: 'A tree lying on its roots can stand up again when it is cut; bent wood springs; a lodged tree falls without warning. Do not work under or beside one, do not climb it, and do not cut the tree that holds it. Mark it, keep everyone away, and call a licensed or trained tree professional.',
    lookUp: '29 CFR 1910.266(h)(1)',
  },
  snapped: {
    title: 'A snapped stem is loaded.',
    text: 'It is bent and under strain, and may be split far below the break. Have it freed and cut to length by a trained professional.',
  },
  downedLine: {
    title: 'A line is down.',
    text: 'Stay away from the tree, the logs and anything that touches the line, and call the utility. Nobody works here until they say it is safe.',
    lookUp: 'your utility',
  },
  lines: {
    title: 'Treat every wire as live.',
    text: 'If a tree or log touches a wire, or a wire is down, stay well away and call the utility. Keep people, ladders, booms and raised loads at least 10 feet from lines up to 50 kV, and farther from higher ones. The mill is set up clear of overhead lines too.',
    lookUp: '29 CFR 1910.333(c)(3) and 1926.1408, and your utility',
  },
  saw: {
    title: 'Dressed for a chain saw.',
    text: 'Head, eye and face, and hearing protection, leg protection from thigh to boot, cut-resistant boots and gloves; a first-aid kit in reach and somebody who knows how to use it. Start the saw on the ground or held firm with the brake on, never by dropping it, and stop it or set the brake when walking. Follow the maker\'s manual.',
    lookUp: '29 CFR 1910.266(d) and (e)',
  },
  bucking: {
    title: 'Stand uphill, and read the bind.',
    text: 'Cut logs to length from the uphill side unless they are chocked. See where the wood is squeezed and where it is stretched before cutting: a log under load kicks, pinches or splits toward the saw.',
    lookUp: '29 CFR 1910.266(h)(3)',
  },
  rolling: {
    title: 'Logs roll.',
    text: 'Never stand below a log or between a log and the mill. Chock every log on the pile. Loosen a pile from its end, top first. Green logs weigh more than they look: see the weight beside each log, bark included.',
  },
  slope: {
    title: 'Steep ground.',
    text: 'Logs roll and slide. Chock each one, work from above or the side, and let nobody stand below. A mill and a trailer need level ground.',
  },
  frozen: {
    title: 'Frozen logs.',
    text: 'They saw slower and dull blades sooner; slippery bark rolls underfoot.',
  },
  lifting: {
    title: 'Know the weight before lifting.',
    text: 'Ask a loader for its rating at the centre of the load, not at the pins, and leave a margin. Nobody stands under or within reach of a raised log. On a slope or soft ground, stop and think again.',
    lookUp: "the machine's own load chart and manual",
  },
  mill: {
    title: 'Stay behind the sawyer\'s line.',
    text: 'Guards stay on, loose clothing and gloves stay away from moving parts, and only the sawyer runs the mill. Watch from where the sawyer tells you, out of line with the blade: a band can break. Wear eye and ear protection. Nobody under 18 helps at the mill. Keep children and animals away.',
    lookUp: '29 CFR 1910.265, child labor rules, and the mill\'s manual',
  },
  metal: {
    title: 'Metal in the log.',
    text: 'Yard and fence-line trees carry nails, wire, hooks and insulators. A blue-black stain in the end grain is a warning. Check with a metal detector before sawing, tell the sawyer what you know, and keep clear: a struck blade throws pieces.',
  },
  dust: {
    title: 'Dust and noise.',
    text: 'Wear hearing and eye protection near the mill and a dust mask when moving sawdust or planing dry boards. Some woods irritate skin and lungs. Keep sawdust from engines and sparks.',
  },
  trailer: {
    title: 'A load of logs on a trailer.',
    text: 'Each outside log bears on at least two stakes and its ends reach at least 6 inches beyond them; shorter logs on top need at least two tie-downs. Check the weight against the trailer, the hitch, the tires and the brakes of the tow vehicle.',
    source: 'a published driver\'s-licence summary of 49 CFR 393.116',
    lookUp: '49 CFR 393.102 to 393.116 and your state\'s rules',
  },
  tieDowns: {
    title: 'Tie-downs for half the weight.',
    text: 'Together they must be rated for at least half the weight of the load. Stand clear of logs that can roll when they are loosened.',
    lookUp: '49 CFR 393.106(d)',
  },
  licence: {
    title: 'Licence for a heavy combination.',
    text: 'A combination rated over 26,000 lb with a trailer over 10,000 lb usually asks for a commercial driver\'s licence when used for business.',
    lookUp: '49 CFR 383 and your state',
  },
  ash: {
    title: 'Ash and the emerald ash borer.',
    text: 'The federal quarantine ended on 14 January 2021. State and local rules can remain: ask before ash logs, bark or firewood leave the county.',
    source: '85 FR 81085 (15 December 2020)',
    lookUp: 'your state\'s department of agriculture',
  },
  firewood: {
    title: 'Firewood stays near.',
    text: 'Moving firewood is a common way for pests to travel. Burn it where it was cut. Hardwood firewood, and ash with bark, were the regulated articles.',
    source: 'texts of a state forestry division and USDA APHIS on firewood',
  },
  quarantine: {
    title: 'Quarantines on moving wood.',
    text: 'Quarantines may forbid moving logs, bark and firewood: spotted lanternfly, spongy moth, thousand cankers, oak wilt and others have their own areas and permits. Ask your state’s agriculture department; sawing on the site usually avoids the question.',
    lookUp: 'your state\'s department of agriculture',
  },
  oakWilt: {
    title: 'Oak in spring and early summer.',
    text: 'Cutting or wounding oaks in spring and early summer can spread oak wilt to the trees around. If one has come down, cover stumps and wounds the same day, and ask a forester before moving the wood.',
    lookUp: 'your state forester; dates differ by state',
  },
  walnut: {
    title: 'Walnut and horses.',
    text: 'Black walnut shavings or sawdust in a stall can founder a horse, and so can stall boards of walnut. Keep walnut out of stables and paddocks.',
    lookUp: 'your veterinarian',
  },
  dwelling: {
    title: 'Lumber for a building.',
    text: 'Lumber that carries a dwelling often needs a grade stamp or a certificate. Ask the building department before you count on your own boards. Air-dried (about 20 %) is not dry enough for indoor work, which needs 6–8 %.',
    lookUp: 'your building department',
  },
  ownership: {
    title: 'Whose tree is it?',
    text: 'Ask before it is cut or sold: a tree on the boundary, on a utility or road easement, in town, or in an insurance claim may not be yours alone. Ask whether a cutting notice or permit is due.',
    lookUp: 'your county or town, the utility, your insurer',
  },
} as const satisfies Record<string, CautionText>;

export type CautionName = keyof typeof cautions;

/** The cautions of these names, in this order. */
export const told = (...names: readonly CautionName[]): readonly CautionText[] => names.map((name) => cautions[name]);

/** Where a caution comes from, in words. */
export const cautionSource = ({ source, lookUp }: Pick<CautionText, 'source' | 'lookUp'>): string =>
  `${source ? `Source: ${source}.` : 'Usual practice; check the rule that applies to you.'}${lookUp ? ` Where to look: ${lookUp}.` : ''}`;
