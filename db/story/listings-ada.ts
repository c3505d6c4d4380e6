import { logs, piece, type Tree } from './trees.ts';

/** Ada's trees: the landowner whose desk the demo shows. */
export const adasTrees: readonly Tree[] = [
  { key: 'ada-maple', owner: 'ada', zip: '54665', away: [0.4, 0.6], where: 'yard', listed: -36, closes: -27, pictures: 2,
    logs: logs('Sugar maple', '15.5 17.5 10.5', '14 15.5 10.5', '12.5 14 8.5', '13 - 8.5'),
    pieces: [piece('Bench seat', '2 8/4 14 6'), piece('Shelves', '10 4/4 8 8')],
    note: 'The maple by the milk house. I want a bench out of it and shelves from the rest.' },
  { key: 'ada-oak', owner: 'ada', zip: '54665', away: [0.5, 0.5], where: 'field', listed: -26, closes: -8, pictures: 4,
    logs: logs('White oak', '19 21.5 12.5', '17 19 12.5', '15.5 17 10.5', '14 15.5 10.5', '18 20 8.5'),
    pieces: [piece('Table top', '6 8/4 9 8'), piece('Trestles', '4 12/4 6 4'), piece('Floor boards', '40 4/4 6 10')],
    note: 'Two white oaks from the edge of the hayfield, skidded to the lane and up on poles. A table first, then flooring with what is left.' },
  { key: 'ada-walnut', owner: 'ada', zip: '54665', away: [0.6, 0.4], where: 'yard', listed: -12, closes: 9, pictures: 4,
    logs: logs('Black walnut', '22 25 9', '19.5 21 8.5', '16 18 8.5', '13.5 - 8.5 a crotch at the top end'),
    pieces: [piece('Slabs for a counter', '3 10/4 18 8', 'full-sawn', '', 'slab'), piece('Drawer fronts', '12 4/4 7 8'), piece('Stair treads', '6 5/4 11 4', 'full-sawn', 'on')],
    note: 'The walnut that stood over the house. Uprooted whole; the stump is off. I would like slabs from the butt log and boards from the rest.',
    answers: { metalNote: 'There was a clothes line on it for forty years. I pulled two hooks and cannot promise there is no third.' } },
  { key: 'ada-pine', owner: 'ada', zip: '54665', away: [0.7, 0.7], where: 'field', listed: -22, closes: -12, pictures: 2,
    logs: logs('Eastern white pine', '16 18 12.5', '15 16.5 12.5', '14 15.5 12.5', '12 - 12.5', '11.5 - 10.5', '17 19 10.5'),
    pieces: [piece('Siding', '60 4/4 10 12'), piece('Studs for a shed', '20 2 4 8', 'store-size')],
    note: 'Pine for a wood shed: board and batten, and framing.' },
  { key: 'ada-ash', owner: 'ada', zip: '54665', away: [0.3, 0.8], where: 'woods', listed: null, closes: 21,
    logs: logs('White ash', '13 15 8.5', '12 - 8.5'), pieces: [piece('Tool handles', '30 6/4 2 4')], note: 'Still up in the ravine. I have to get it out first.' },
];
