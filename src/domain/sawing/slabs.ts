import { largeEnd, type LogShape, radiusAt } from './log-shape.ts';

/** A live-edge slab, sawn parallel to the pith: its two faces are of different widths, and both grow towards the butt. */
export interface Slab {
  /** From the pith to its lower face, in. */
  readonly bottomIn: number;
  readonly thicknessIn: number;
  readonly lengthFt: number;
  /** Widths of the wider and the narrower face inside bark, in, at each end and half-way. */
  readonly wideFaceIn: AlongLog;
  readonly narrowFaceIn: AlongLog;
  /** Mean of both faces half-way along × length, as slabs are priced. */
  readonly meanFaceSqFt: number;
}

export interface AlongLog {
  readonly small: number;
  readonly middle: number;
  readonly large: number;
}

const chord = (radiusIn: number, fromPithIn: number): number => 2 * Math.sqrt(Math.max(0, radiusIn ** 2 - fromPithIn ** 2));

/**
 * A log sawn through and through into live-edge slabs of one thickness, from below up. The pith lies in the middle of one slab, never
 * between two, so that it checks in one board only. A slab counts while its narrower face is wide enough at the small end.
 * @param leastFaceIn the narrowest face worth keeping, in.
 * @param clearIn slabs keep so far from the pith on both sides (a rotten heart, a cut too wide for the mill), in; 0 for none.
 */
export function liveEdgeSlabs(log: LogShape, kerfIn: number, thicknessIn: number, leastFaceIn = 6, clearIn = 0): Slab[] {
  const radii = { small: log.smallEndIn / 2, middle: radiusAt(log, log.lengthFt / 2), large: largeEnd(log) / 2 };
  const face = (fromPithIn: number): AlongLog => ({ small: chord(radii.small, fromPithIn), middle: chord(radii.middle, fromPithIn), large: chord(radii.large, fromPithIn) });
  const pitch = thicknessIn + kerfIn;
  const reach = Math.ceil(radii.large / pitch) + 1;
  const outward = (index: number): number => clearIn + index * pitch;
  const bottoms = clearIn > 0
    ? Array.from({ length: 2 * reach }, (_, index) => (index < reach ? -outward(reach - 1 - index) - thicknessIn : outward(index - reach)))
    : Array.from({ length: 2 * reach + 1 }, (_, index) => (index - reach) * pitch - thicknessIn / 2);
  return bottoms.flatMap((bottomIn): Slab[] => {
    const [far, near] = [Math.max(Math.abs(bottomIn), Math.abs(bottomIn + thicknessIn)), Math.min(Math.abs(bottomIn), Math.abs(bottomIn + thicknessIn))];
    const [wideFaceIn, narrowFaceIn] = [face(near), face(far)];
    if (narrowFaceIn.small < leastFaceIn - 1e-9) return [];
    return [{ bottomIn, thicknessIn, lengthFt: log.lengthFt, wideFaceIn, narrowFaceIn, meanFaceSqFt: ((wideFaceIn.middle + narrowFaceIn.middle) / 2 / 12) * log.lengthFt }];
  });
}
