import type { ReactElement } from 'react';

export interface SidePiece {
  /** From the small end, ft. */
  readonly startFt: number;
  readonly lengthFt: number;
  /** What the piece is: "8 ft", "firewood". */
  readonly label: string;
}

export interface LogSideProps {
  readonly lengthFt: number;
  readonly smallEndIn: number;
  readonly largeEndIn: number;
  /** Where the saw goes, ft from the small end. */
  readonly cutsFt?: readonly number[];
  readonly pieces?: readonly SidePiece[];
  /** Trim or waste between pieces, shaded. */
  readonly waste?: readonly { readonly startFt: number; readonly lengthFt: number }[];
  /** Thickness is drawn this many times too large, or a long stem is a line. Say so beside the picture. */
  readonly thicker?: number;
  readonly label?: string | undefined;
}

/** A log along its length, small end on the left, with the cuts that make its lengths. Static SVG, no script. */
export function LogSide({ lengthFt, smallEndIn, largeEndIn, cutsFt = [], pieces = [], waste = [], thicker = 2, label }: LogSideProps): ReactElement {
  const unit = 12 / thicker;
  const width = lengthFt * unit;
  const halfAt = (ft: number): number => (smallEndIn + ((largeEndIn - smallEndIn) * ft) / lengthFt) / 2;
  const band = (from: number, to: number): string => `M${from * unit} ${-halfAt(from)}L${to * unit} ${-halfAt(to)}V${halfAt(to)}L${from * unit} ${halfAt(from)}Z`;
  const tallest = Math.max(smallEndIn, largeEndIn) / 2;
  const size = Math.max(width * 0.022, 2.4);
  const [top, bottom] = [tallest + size * 0.8, tallest + size * (pieces.length > 0 ? 2.2 : 0.8)];
  const words = label ? { role: 'img', 'aria-label': label } : { 'aria-hidden': true as const };
  return (
    <svg className="log-drawing w-full" viewBox={`${-size * 0.5} ${-top} ${width + size} ${top + bottom}`} focusable="false" {...words}>
      <path className="log-bark" d={band(0, lengthFt)} />
      <path className="log-sapwood" d={band(0, lengthFt)} transform="scale(1 0.92)" />
      {waste.map((part) => <path className="log-trim" key={part.startFt} d={band(part.startFt, part.startFt + part.lengthFt)} />)}
      <path className="log-ring" d={`M0 0H${width}`} strokeDasharray="6 3" />
      {cutsFt.map((ft) => <path className="log-cut" key={ft} d={`M${ft * unit} ${-halfAt(ft) - size * 0.6}V${halfAt(ft) + size * 0.6}`} />)}
      {pieces.map((piece) => (
        <text className="log-words" fontSize={size} key={piece.startFt} textAnchor="middle" x={(piece.startFt + piece.lengthFt / 2) * unit} y={tallest + size * 1.7}>{piece.label}</text>
      ))}
    </svg>
  );
}
