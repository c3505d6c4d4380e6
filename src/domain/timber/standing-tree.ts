import { told, type CautionText } from '../cautions.ts';

const radians = (degrees: number): number => (degrees * Math.PI) / 180;

/**
 * Height of a tree with a stick held upright at arm's length, feet: similar triangles. You stand `distanceFt` from the tree
 * on level ground; `stickIn` is the part of the stick that covers the tree from foot to top, `armIn` the distance from eye to stick.
 */
export const heightByStickFt = (distanceFt: number, stickIn: number, armIn: number): number => (distanceFt * stickIn) / armIn;

/**
 * Height from the angles to the top and to the foot and the level distance, feet. Angles in degrees; the foot below the eye
 * is negative. Angles must be between −80 and 80, the top above the foot.
 */
export const heightByAngleFt = (distanceFt: number, topDeg: number, footDeg: number): number =>
  distanceFt * (Math.tan(radians(topDeg)) - Math.tan(radians(footDeg)));

export interface Reach {
  /** Where the top could come down, measured from the stump, feet: the height and a tenth more (common practice, no source). */
  readonly reachFt: number;
  /** Everybody else stays at least this far away while a tree is felled, feet: two tree lengths. */
  readonly clearZoneFt: number;
  readonly cautions: readonly CautionText[];
}

/** How far a tree reaches on the ground, and the zone to keep clear (29 CFR 1910.266: two tree lengths), with the cautions. */
export const reachOf = (heightFt: number): Reach => ({ reachFt: heightFt * 1.1, clearZoneFt: heightFt * 2, cautions: told('felling', 'storm', 'distance', 'height') });

/** Usable 16-ft logs below a height where the stem becomes too thin or too rough, in halves, down; a foot is left for the stump. */
export const usableLogs16ft = (usableHeightFt: number): number => Math.max(0, Math.floor(((usableHeightFt - 1) / 16) * 2) / 2);
