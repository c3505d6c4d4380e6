import type { ReactElement } from 'react';

export interface StemSideProps {
  /** Diameters inside bark along the stem, butt first, in; places in ft. */
  readonly measures: readonly { readonly fromButtFt: number; readonly diameterIn: number }[];
  readonly logs: readonly { readonly fromButtFt: number; readonly lengthFt: number; readonly trimFt: number; readonly label: string }[];
  readonly leaveOut: readonly { readonly fromFt: number; readonly toFt: number }[];
  /** Diameter at a place, in. */
  readonly diameterAt: (fromButtFt: number) => number;
  readonly label: string;
  /** Thickness is drawn this many times too large, or a long stem is a line. */
  readonly thicker?: number;
}

/** A felled stem along its length, the butt on the left, with the logs that are cut from it. Static SVG, no script. */
export function StemSide({ measures, logs, leaveOut, diameterAt, label, thicker = 4 }: StemSideProps): ReactElement {
  const unit = 12 / thicker;
  const places = measures.map(({ fromButtFt }) => fromButtFt).sort((a, b) => a - b);
  const end = places.at(-1) ?? 0;
  const widest = Math.max(1, ...measures.map(({ diameterIn }) => diameterIn));
  const size = Math.max((end * unit) / 30, 2.4);
  const outline = (from: number, to: number): string => {
    const along = [from, ...places.filter((place) => place > from && place < to), to];
    const upper = along.map((place) => `${place * unit} ${-diameterAt(place) / 2}`);
    const lower = [...along].reverse().map((place) => `${place * unit} ${diameterAt(place) / 2}`);
    return `M${[...upper, ...lower].join('L')}Z`;
  };
  const half = widest / 2;
  const step = end > 60 ? 20 : 10;
  return (
    <svg className="log-drawing w-full" viewBox={`${-size * 0.6} ${-half - size * 2} ${end * unit + size * 1.2} ${widest + size * 6}`} role="img" aria-label={label} focusable="false">
      <path className="log-trim" d={outline(places[0] ?? 0, end)} />
      {logs.map(({ fromButtFt, lengthFt, trimFt, label: words }) => (
        <g key={fromButtFt}>
          <path className="log-sapwood" d={outline(fromButtFt, fromButtFt + lengthFt)} />
          <path className="log-cut" d={`M${fromButtFt * unit} ${-half - size * 0.6}V${half + size * 0.6}M${(fromButtFt + lengthFt + trimFt) * unit} ${-half - size * 0.6}V${half + size * 0.6}`} />
          <text className="log-words" fontSize={size} textAnchor="middle" x={(fromButtFt + lengthFt / 2) * unit} y={half + size * 1.8}>{words}</text>
        </g>
      ))}
      {leaveOut.map(({ fromFt, toFt }) => <path className="log-rot" key={fromFt} d={outline(Math.min(fromFt, end), Math.min(toFt, end))} />)}
      <path className="log-ring" d={`M0 0H${end * unit}`} strokeDasharray="6 3" />
      <path className="log-scale" d={`M0 ${half + size * 2.6}H${end * unit}`} />
      {Array.from({ length: Math.floor(end / step) + 1 }, (_, index) => index * step).map((feet) => (
        <g key={feet}>
          <path className="log-scale" d={`M${feet * unit} ${half + size * 2.4}v${size * 0.4}`} />
          {feet < end - 3 || feet === 0 ? <text className="log-words" fontSize={size * 0.8} textAnchor={feet === 0 ? 'start' : 'middle'} x={feet * unit} y={half + size * 3.6}>{feet === 0 ? 'butt' : `${feet} ft`}</text> : null}
        </g>
      ))}
    </svg>
  );
}
