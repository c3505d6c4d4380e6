/**
 * Days to air-dry 4/4 lumber from green to 20 % moisture. Source: USDA Forest Products Laboratory, Air Drying of Lumber
 * (FPL-GTR-117, 1999) and Wood Handbook, table 13-1. Nearly every row was written from memory: show it as a range and say so.
 * Species are those the table names; where it splits a species (heartwood and sapwood, light and sinker) both rows are kept.
 * The source file is `tests/reference/data/air_drying.csv`.
 */
export interface AirDryingRow {
  readonly source: string;
  readonly fromDays: number;
  readonly toDays: number;
  readonly sure: 'seen' | 'memory';
}

// prettier-ignore
export const airDryingRows: Readonly<Record<string, readonly AirDryingRow[]>> = {
  'american-basswood': [{ source: 'basswood, American', fromDays: 40, toDays: 150, sure: 'memory' }],
  'american-beech': [{ source: 'beech, American', fromDays: 70, toDays: 200, sure: 'memory' }],
  'american-elm': [{ source: 'elm, American', fromDays: 50, toDays: 150, sure: 'memory' }],
  'american-sycamore': [{ source: 'sycamore, American', fromDays: 30, toDays: 150, sure: 'memory' }],
  'atlantic-white-cedar': [{ source: 'cedar, Atlantic white', fromDays: 60, toDays: 200, sure: 'memory' }],
  'baldcypress': [{ source: 'baldcypress', fromDays: 100, toDays: 300, sure: 'memory' }],
  'bigleaf-maple': [{ source: 'maple, bigleaf', fromDays: 60, toDays: 180, sure: 'memory' }],
  'bigtooth-aspen': [{ source: 'aspen, bigtooth', fromDays: 50, toDays: 150, sure: 'memory' }],
  'black-ash': [{ source: 'ash, black', fromDays: 60, toDays: 200, sure: 'memory' }],
  'black-cherry': [{ source: 'cherry, black', fromDays: 70, toDays: 200, sure: 'memory' }],
  'black-cottonwood': [{ source: 'cottonwood, black', fromDays: 60, toDays: 150, sure: 'memory' }],
  'black-walnut': [{ source: 'walnut, black', fromDays: 70, toDays: 200, sure: 'memory' }],
  'black-willow': [{ source: 'willow, black', fromDays: 30, toDays: 150, sure: 'memory' }],
  'blackgum': [{ source: 'tupelo, black', fromDays: 70, toDays: 200, sure: 'memory' }],
  'butternut': [{ source: 'butternut', fromDays: 60, toDays: 200, sure: 'memory' }],
  'chestnut-oak': [{ source: 'oak, southern white (chestnut)', fromDays: 120, toDays: 320, sure: 'memory' }],
  'douglas-fir': [{ source: 'Douglas-fir, coast', fromDays: 20, toDays: 200, sure: 'memory' }],
  'eastern-cottonwood': [{ source: 'cottonwood, eastern', fromDays: 50, toDays: 150, sure: 'memory' }],
  'eastern-hemlock': [{ source: 'hemlock, eastern', fromDays: 90, toDays: 200, sure: 'memory' }],
  'eastern-redcedar': [{ source: 'cedar, eastern redcedar', fromDays: 60, toDays: 90, sure: 'memory' }],
  'eastern-white-pine': [{ source: 'pine, eastern white', fromDays: 60, toDays: 200, sure: 'seen' }],
  'engelmann-spruce': [{ source: 'spruce, Engelmann', fromDays: 20, toDays: 120, sure: 'memory' }],
  'green-ash': [{ source: 'ash, green', fromDays: 60, toDays: 200, sure: 'memory' }],
  'hackberry': [{ source: 'hackberry', fromDays: 30, toDays: 150, sure: 'memory' }],
  'jack-pine': [{ source: 'pine, jack', fromDays: 40, toDays: 200, sure: 'memory' }],
  'loblolly-pine': [{ source: 'pine, southern: loblolly', fromDays: 30, toDays: 150, sure: 'memory' }],
  'lodgepole-pine': [{ source: 'pine, lodgepole', fromDays: 15, toDays: 150, sure: 'memory' }],
  'longleaf-pine': [{ source: 'pine, southern: longleaf', fromDays: 30, toDays: 150, sure: 'memory' }],
  'mockernut-hickory': [{ source: 'hickory, true', fromDays: 60, toDays: 200, sure: 'memory' }],
  'northern-red-oak': [{ source: 'oak, northern red', fromDays: 70, toDays: 200, sure: 'memory' }],
  'paper-birch': [{ source: 'birch, paper', fromDays: 40, toDays: 200, sure: 'memory' }],
  'pignut-hickory': [{ source: 'hickory, true', fromDays: 60, toDays: 200, sure: 'memory' }],
  'ponderosa-pine': [{ source: 'pine, ponderosa', fromDays: 15, toDays: 150, sure: 'memory' }],
  'quaking-aspen': [{ source: 'aspen, quaking', fromDays: 50, toDays: 150, sure: 'memory' }],
  'red-alder': [{ source: 'alder, red', fromDays: 20, toDays: 180, sure: 'memory' }],
  'red-maple': [{ source: 'maple, red', fromDays: 30, toDays: 120, sure: 'memory' }],
  'red-pine': [{ source: 'pine, red', fromDays: 40, toDays: 200, sure: 'memory' }],
  'redwood': [{ source: 'redwood, old growth (light)', fromDays: 60, toDays: 185, sure: 'memory' }, { source: 'redwood, old growth (sinker)', fromDays: 200, toDays: 365, sure: 'memory' }],
  'shagbark-hickory': [{ source: 'hickory, true', fromDays: 60, toDays: 200, sure: 'memory' }],
  'shortleaf-pine': [{ source: 'pine, southern: shortleaf', fromDays: 30, toDays: 150, sure: 'memory' }],
  'silver-maple': [{ source: 'maple, silver', fromDays: 30, toDays: 120, sure: 'memory' }],
  'sitka-spruce': [{ source: 'spruce, Sitka', fromDays: 40, toDays: 150, sure: 'memory' }],
  'slash-pine': [{ source: 'pine, southern: slash', fromDays: 30, toDays: 150, sure: 'memory' }],
  'southern-red-oak': [{ source: 'oak, southern red', fromDays: 100, toDays: 300, sure: 'memory' }],
  'sugar-maple': [{ source: 'maple, sugar', fromDays: 50, toDays: 200, sure: 'memory' }],
  'sugar-pine': [{ source: 'pine, sugar (light)', fromDays: 15, toDays: 90, sure: 'memory' }, { source: 'pine, sugar (sinker)', fromDays: 45, toDays: 200, sure: 'memory' }],
  'sweet-birch': [{ source: 'birch, sweet', fromDays: 70, toDays: 200, sure: 'memory' }],
  'sweetgum': [{ source: 'sweetgum, heartwood', fromDays: 70, toDays: 300, sure: 'memory' }, { source: 'sweetgum, sapwood', fromDays: 60, toDays: 200, sure: 'memory' }],
  'water-tupelo': [{ source: 'tupelo, water', fromDays: 70, toDays: 200, sure: 'memory' }],
  'western-hemlock': [{ source: 'hemlock, western', fromDays: 60, toDays: 200, sure: 'memory' }],
  'western-larch': [{ source: 'larch, western', fromDays: 60, toDays: 120, sure: 'memory' }],
  'white-ash': [{ source: 'ash, white', fromDays: 60, toDays: 200, sure: 'memory' }],
  'white-oak': [{ source: 'oak, northern white', fromDays: 80, toDays: 250, sure: 'memory' }],
  'white-spruce': [{ source: 'spruce, white', fromDays: 30, toDays: 120, sure: 'memory' }],
  'yellow-birch': [{ source: 'birch, yellow', fromDays: 70, toDays: 200, sure: 'memory' }],
  'yellow-poplar': [{ source: 'yellow-poplar', fromDays: 40, toDays: 150, sure: 'memory' }],
};
