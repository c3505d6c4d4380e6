/**
 * Defects of a log and what they take off its scale.
 *
 * The percentage rules are those of L. R. Grosenbaugh, Shortcuts for Cruisers and Scalers, Southern Forest Experiment Station
 * Occasional Paper 126 (1952), p. 14: their aim and place were seen, the formulas are from memory. The squared deduction is
 * the squared-defect method of FSH 2409.11 (formula from memory; 15 is 12 / 0.8, a fifth lost in kerf).
 * Lengths in feet, everything across the log in inches, angles in degrees.
 */
export type Defect =
  | { readonly kind: 'section'; readonly lengthFt: number }
  | { readonly kind: 'wedge'; readonly lengthFt: number; readonly angleDeg: number }
  | { readonly kind: 'sweep'; readonly departureIn: number }
  | { readonly kind: 'crook'; readonly deflectionIn: number; readonly lengthFt: number }
  | { readonly kind: 'interiorRot'; readonly widthIn: number; readonly heightIn: number; readonly lengthFt: number }
  | { readonly kind: 'squared'; readonly widthIn: number; readonly heightIn: number; readonly lengthFt: number };

export type DefectKind = Defect['kind'];

/** The log a defect is measured against: scaling diameter and scaling length. */
export interface DefectLog {
  readonly diameterIn: number;
  readonly lengthFt: number;
}

const within = (share: number): number => Math.min(1, Math.max(0, share));

/** Sweep that costs nothing: 2 in on a 16-ft log, 1 in on 8 ft. */
export const sweepAllowanceIn = (lengthFt: number): number => lengthFt / 8;

/** Share of the gross scale that one defect takes, 0 to 1; the squared deduction takes board feet instead and gives 0 here. */
export function defectShare(defect: Defect, log: DefectLog): number {
  const along = 'lengthFt' in defect ? within(defect.lengthFt / log.lengthFt) : 1;
  switch (defect.kind) {
    case 'section':
      return along;
    case 'wedge':
      return within(along * (defect.angleDeg / 360));
    case 'sweep':
      return within((defect.departureIn - sweepAllowanceIn(log.lengthFt)) / log.diameterIn);
    case 'crook':
      return within(along * (defect.deflectionIn / log.diameterIn));
    case 'interiorRot':
      return within(along * within(((defect.widthIn + 1) * (defect.heightIn + 1)) / (log.diameterIn - 1) ** 2));
    case 'squared':
      return 0;
  }
}

/** Share of the gross scale that all defects take together: their sum, at most the whole. */
export const culledShare = (defects: readonly Defect[], log: DefectLog): number =>
  within(defects.reduce((sum, defect) => sum + defectShare(defect, log), 0));

/** Board feet that squared defects take off every rule: width × height × length / 15. */
export const squaredDeduction = (defects: readonly Defect[]): number =>
  defects.reduce((sum, defect) => (defect.kind === 'squared' ? sum + (defect.widthIn * defect.heightIn * defect.lengthFt) / 15 : sum), 0);

/** For the "how this is worked out" panel: the name, the formula and where it is from. */
export const defectRules: Readonly<Record<DefectKind, { readonly name: string; readonly formula: string; readonly source: string }>> = (() => {
  const percentage = 'L. R. Grosenbaugh, Occasional Paper 126 (1952), p. 14; formula from memory';
  return {
    section: { name: 'Whole section', formula: 'l / L', source: percentage },
    wedge: { name: 'Wedge', formula: 'l / L × angle / 360', source: percentage },
    sweep: { name: 'Sweep', formula: '(departure − L / 8) / D, nothing below zero', source: percentage },
    crook: { name: 'Crook', formula: 'deflection / D × l / L', source: percentage },
    interiorRot: { name: 'Interior rot', formula: '(width + 1) × (height + 1) / (D − 1)² × l / L', source: percentage },
    squared: { name: 'Squared defect', formula: 'width × height × length / 15 board feet', source: 'FSH 2409.11, squared-defect method; formula from memory' },
  };
})();
