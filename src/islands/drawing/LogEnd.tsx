import type { ReactElement } from 'react';
import type { CutLine, Left } from '~/domain/sawing/cut-lines.ts';
import { boardRect, outline, ringRadii, seedOf, smoothPath, closedPath, type DrawnBoard } from '~/domain/drawing.ts';

export interface LogEndProps {
  /** Diameter inside bark at the small end, in. */
  readonly smallEndIn: number;
  /** Bark on one side, in. */
  readonly barkIn?: number;
  /** Share of the radius that is heartwood; 0 when the species shows none. */
  readonly heartShare?: number;
  /** Diameter of rot or a hole round the pith, in. */
  readonly heartDefectIn?: number | undefined;
  /** The same name always gives the same outline. */
  readonly seed: string | number;
  readonly boards?: readonly DrawnBoard[];
  /** Width of the picture in inches of wood: give several logs the same to compare their sizes. */
  readonly frameIn?: number | undefined;
  /** Width on the screen before it is made to fit, px. */
  readonly sizePx?: number;
  /** Draws a bar of this many inches below the log. */
  readonly scaleBarIn?: number | undefined;
  /** A dashed circle of this diameter, in: the small end of a log drawn at its large end. */
  readonly ringIn?: number | undefined;
  /** Shows one cut as it is made: the log turned for it, what earlier cuts have left, the bed below. */
  readonly cut?: { readonly line: CutLine; readonly left: Left } | undefined;
  /** What the picture shows, in words; left out, the picture is decoration beside its figures. */
  readonly label?: string | undefined;
}

/** A log end to scale with its sawing plan: bark, sapwood, heartwood, rings, and the boards it gives. Static SVG, no script. */
export function LogEnd({ smallEndIn, barkIn = smallEndIn * 0.025, heartShare = 0.72, heartDefectIn, seed, boards = [], frameIn, sizePx = 184, scaleBarIn, ringIn, cut, label }: LogEndProps): ReactElement {
  const radius = smallEndIn / 2;
  const number = seedOf(seed);
  const frame = Math.max(frameIn ?? 0, (radius + barkIn) * 2 * 1.075);
  const half = frame / 2;
  const foot = scaleBarIn ? frame * 0.14 : 0;
  const words = label ? { role: 'img', 'aria-label': label } : { 'aria-hidden': true as const };
  const wood = outline(radius, number);
  const grown = 1 + barkIn / radius;
  return (
    <svg className="log-drawing" width={sizePx} height={Math.round((sizePx * (frame + foot)) / frame)} viewBox={`${-half} ${-half} ${frame} ${frame + foot}`} focusable="false" {...words}>
      {cut && <clipPath id={`left-${number}`}><rect {...clipOf(cut.left, half)} /></clipPath>}
      <g transform={cut ? `rotate(${-cut.line.turnDeg})` : undefined}><g clipPath={cut ? `url(#left-${number})` : undefined}>
      <g data-wood="">
      <path className="log-bark" d={closedPath(wood.map((point) => ({ x: point.x * grown, y: point.y * grown })))} />
      <path className="log-sapwood" d={closedPath(wood)} />
      {heartShare > 0 && <path className="log-heartwood" d={smoothPath(outline(radius * heartShare, number + 1, 0.05))} />}
      {sizePx >= 40 && ringRadii(radius * 0.96, sizePx >= 120 ? 6 : 2).map((ring, index) => (
        <path className="log-ring" key={ring} d={smoothPath(outline(ring, number + 1, 0.035 + index * 0.003))} />
      ))}
      {heartDefectIn ? <circle className="log-rot" r={heartDefectIn / 2} /> : <circle className="log-pith" r={Math.max(smallEndIn * 0.012, frame * 0.012)} />}
      </g>
      {ringIn ? <circle className="log-small-end" r={ringIn / 2} /> : null}
      {boards.map((board) => (
        <rect data-start={board.startFt} className={Math.min(board.thicknessIn, board.widthIn) >= 5 ? 'log-board-timber' : 'log-board'} key={`${board.xIn},${board.yIn}`} {...boardRect(board)} />
      ))}
      </g></g>
      {cut && <path className="log-scale" d={`M${-half} ${underside(cut, half * 0.99)}h${frame}`} />}
      {cut && <path className="log-cut-now" d={`M${-half} ${-cut.line.fromPithIn}h${frame}`} />}
      {scaleBarIn ? <ScaleBar lengthIn={scaleBarIn} top={half + foot * 0.25} size={frame * 0.07} /> : null}
    </svg>
  );
}

/** The rectangle that is left, in SVG's axes and no larger than the frame. */
function clipOf({ left, right, bottom, top }: Left, half: number): { x: number; y: number; width: number; height: number } {
  const [from, to, low, high] = [Math.max(-half, left), Math.min(half, right), Math.max(-half, bottom), Math.min(half, top)];
  return { x: from, y: -high, width: to - from, height: high - low };
}

/** Where the bed lies below the turned log, in SVG's axes: under the flat that was cut on that side, or under the bark. */
function underside({ line, left }: NonNullable<LogEndProps['cut']>, lowestIn: number): number {
  const flats: Readonly<Record<number, number>> = { 0: -left.bottom, 90: -left.left, 180: left.top, 270: left.right };
  return Math.min(lowestIn, flats[line.turnDeg] ?? lowestIn);
}

function ScaleBar({ lengthIn, top, size }: { readonly lengthIn: number; readonly top: number; readonly size: number }): ReactElement {
  const half = lengthIn / 2;
  return (
    <g>
      <path className="log-scale" d={`M${-half} ${top - size * 0.25}v${size * 0.5}M${-half} ${top}h${lengthIn}M${half} ${top - size * 0.25}v${size * 0.5}`} />
      <text className="log-words" fontSize={size} textAnchor="middle" x={0} y={top + size * 1.25}>{`${lengthIn} in`}</text>
    </g>
  );
}
