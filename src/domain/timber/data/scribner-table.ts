/**
 * Data of the Scribner Decimal C rule: US Forest Service, National Volume Estimator Library, `scrib.f` (public domain):
 * a factor for each diameter and 148 cells that are printed one unit of 10 board feet higher or lower.
 * Kept beside the checks as `tests/reference/data/scribner_factors.csv` and `scribner_exceptions.csv`.
 */

/** Thousandths of a board foot per foot of length, by whole inch of diameter from 0 (unused) to 120. */
// prettier-ignore
export const scribnerFactorThousandths: readonly number[] = [
  0, 0, 143, 390, 676, 1070, 1160, 1400, 1501, 2084, 3126, 3749, 4900, 6043, 7140, 8880, 10000, 11528, 13290, 14990,
  17499, 18990, 20880, 23510, 25218, 28677, 31249, 34220, 36376, 38040, 41060, 44376, 45975, 48990, 50000, 54688,
  57660, 64319, 66730, 70000, 75240, 79480, 83910, 87190, 92501, 94990, 99075, 103501, 107970, 112292, 116990, 121650,
  126525, 131510, 136510, 141610, 146912, 152210, 157710, 163288, 168990, 174850, 180749, 186623, 193170, 199120,
  205685, 211810, 218501, 225685, 232499, 239317, 246615, 254040, 261525, 269040, 276630, 284260, 292501, 300655,
  308970, 317360, 325790, 334217, 343290, 350785, 359120, 368380, 376610, 385135, 393380, 402499, 410834, 419166,
  428380, 437499, 446565, 455010, 464150, 473430, 482490, 491700, 501700, 511700, 521700, 531700, 541700, 552499,
  562501, 573350, 583350, 594150, 604170, 615010, 625890, 636660, 648380, 660000, 671700, 683330, 695011,
];

/** Other factors for 6 to 11 in when the length is 16 to 31 ft. */
export const scribnerFactorFrom16Ft: Readonly<Record<number, number>> = { 6: 1249, 7: 1608, 8: 1854, 9: 2410, 10: 3542, 11: 4167 };

/** Other factors for 6 to 11 in when the length is 32 ft and over. */
export const scribnerFactorFrom32Ft: Readonly<Record<number, number>> = { 6: 1570, 7: 1800, 8: 2200, 9: 2900, 10: 3815, 11: 4499 };

/** By length in feet: the diameters whose cell is one unit (10 bf) above what the factor gives, and one below. */
// prettier-ignore
export const scribnerExceptions: Readonly<Record<number, { readonly above: readonly number[]; readonly below: readonly number[] }>> = {
  4: { above: [], below: [42, 46, 51, 52, 53, 54, 55, 60, 63, 65, 72, 73, 74, 75, 76, 80, 86, 88, 93, 96, 98, 101, 102, 103, 104, 105, 106, 111, 112, 115, 118] },
  5: { above: [19, 21], below: [10, 41, 43, 46, 59, 64, 65, 74, 75, 81, 84, 86, 89, 90, 93, 95, 97, 99, 109, 110, 113, 119, 120] },
  6: { above: [20, 21, 82], below: [92, 108, 112, 114] },
  7: { above: [9, 61, 79], below: [11, 71] },
  8: { above: [24, 29, 38, 67, 71, 77, 83], below: [64, 66, 69, 79] },
  9: { above: [29, 43, 51, 61, 74], below: [] },
  10: { above: [9, 71, 77, 83, 107], below: [23, 74, 96] },
  11: { above: [9, 58, 61, 64, 73], below: [25] },
  12: { above: [], below: [10] },
  13: { above: [52, 61, 66, 69], below: [6, 47, 77, 99] },
  14: { above: [], below: [6, 44, 80] },
  15: { above: [45, 51, 61, 74, 80], below: [6, 28] },
  17: { above: [46, 61, 64, 75, 80], below: [] },
  18: { above: [70, 81, 91, 93, 95, 98, 100, 107, 111], below: [44, 71, 77, 83] },
  19: { above: [13], below: [8, 9] },
  20: { above: [62, 64, 66, 69, 79], below: [8, 9, 67, 71, 77] },
};
