import { useRef, useState, type PointerEvent, type ReactElement } from 'react';
import type { Defect } from '~/domain/timber/defects.ts';
import type { LogGroup } from '~/domain/timber/logs-in-url.ts';
import { scaleLog, type ScaleSettings } from '~/domain/timber/log-scale.ts';
import { speciesOf } from '~/domain/timber/species.ts';
import { barkRatio, largeEndOrTaper, trimOf } from '~/domain/timber/taper-and-bark.ts';
import { LogEnd } from '~/islands/drawing/LogEnd.tsx';
import { LogSide } from '~/islands/drawing/LogSide.tsx';
import { Button } from '~/islands/form/choices.tsx';
import { sayFeet, sayInches, type Units } from '~/islands/logs/words.ts';

interface Box {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
}

interface LogPictureProps {
  readonly log: LogGroup;
  readonly settings: ScaleSettings;
  readonly units: Units;
  /** A box of rot was drawn on the end, inches. */
  readonly onDrawRot: (widthIn: number, heightIn: number) => void;
  /** A slice like a piece of pie was drawn on the end, degrees. */
  readonly onDrawWedge: (angleDeg: number) => void;
}

/** A slice of the end, degrees round from the top. */
interface Slice {
  readonly fromDeg: number;
  readonly angleDeg: number;
}

const onCircle = (radius: number, deg: number): string => `${radius * Math.sin((deg * Math.PI) / 180)} ${-radius * Math.cos((deg * Math.PI) / 180)}`;
const sector = (radius: number, { fromDeg, angleDeg }: Slice): string => {
  const angle = Math.min(angleDeg, 359.9);
  return `M0 0L${onCircle(radius, fromDeg)}A${radius} ${radius} 0 ${angle > 180 ? 1 : 0} 1 ${onCircle(radius, fromDeg + angle)}Z`;
};

/** The lesser slice between two directions from the pith, to 5 degrees. */
function sliceBetween(a: Place, b: Place): Slice {
  const degrees = ({ x, y }: Place): number => (Math.atan2(x, -y) * 180) / Math.PI;
  const [from, to] = [degrees(a), degrees(b)];
  const round = (((to - from) % 360) + 360) % 360;
  const angleDeg = Math.max(5, Math.round(Math.min(round, 360 - round) / 5) * 5);
  return { fromDeg: round <= 180 ? from : to, angleDeg };
}

interface Place {
  readonly x: number;
  readonly y: number;
}

function DefectOnEnd({ defect, radiusIn, drawn, slice }: { readonly defect: Defect; readonly radiusIn: number; readonly drawn: Box | null; readonly slice: Slice | null }): ReactElement | null {
  if (defect.kind === 'wedge') return <path className="log-rot" d={sector(radiusIn, slice?.angleDeg === defect.angleDeg ? slice : { fromDeg: 0, angleDeg: defect.angleDeg })} />;
  if (defect.kind !== 'interiorRot' && defect.kind !== 'squared') return null;
  const at = drawn && Math.abs(drawn.width - defect.widthIn) < 0.51 && Math.abs(drawn.height - defect.heightIn) < 0.51 ? { x: drawn.x + drawn.width / 2, y: drawn.y + drawn.height / 2 } : { x: 0, y: 0 };
  const box = { x: at.x - defect.widthIn / 2, y: at.y - defect.heightIn / 2, width: defect.widthIn, height: defect.heightIn };
  return defect.kind === 'squared' ? <rect className="log-rot" {...box} /> : <ellipse className="log-rot" cx={at.x} cy={at.y} rx={box.width / 2} ry={box.height / 2} />;
}

/** The log to scale, by its small end and along its length, with its defects; rot and slices can be drawn on the end. */
export function LogPicture({ log, settings, units, onDrawRot, onDrawWedge }: LogPictureProps): ReactElement {
  const [drawing, setDrawing] = useState<'rot' | 'wedge' | null>(null);
  const [slice, setSlice] = useState<Slice | null>(null);
  const [box, setBox] = useState<Box | null>(null);
  const start = useRef<Place | null>(null);
  const bark = barkRatio(speciesOf(log.species));
  const frameIn = log.smallEndIn * bark * 1.12;
  const large = largeEndOrTaper(log);
  const trim = trimOf(log.lengthFt);
  const scaled = scaleLog(log, settings);
  const lost = (log.defects ?? []).flatMap((defect) => (defect.kind === 'section' || defect.kind === 'crook' ? [Math.min(defect.lengthFt, log.lengthFt)] : []));

  const point = (event: PointerEvent<SVGSVGElement>): Place => {
    const frame = event.currentTarget.getBoundingClientRect();
    return { x: ((event.clientX - frame.left) / frame.width - 0.5) * frameIn, y: ((event.clientY - frame.top) / frame.height - 0.5) * frameIn };
  };
  const move = (event: PointerEvent<SVGSVGElement>): void => {
    if (!start.current) return;
    const here = point(event);
    if (drawing === 'wedge') return setSlice(sliceBetween(start.current, here));
    const half = (inches: number): number => Math.max(0.5, Math.round(Math.abs(inches) * 2) / 2);
    setBox({ x: Math.min(start.current.x, here.x), y: Math.min(start.current.y, here.y), width: half(here.x - start.current.x), height: half(here.y - start.current.y) });
  };
  const finish = (): void => {
    start.current = null;
    if (drawing === 'rot' && box) onDrawRot(box.width, box.height);
    else if (drawing === 'wedge' && slice) onDrawWedge(slice.angleDeg);
    else return;
    setDrawing(null);
  };

  return (
    <figure>
      <div className="relative mx-auto w-fit">
        <LogEnd smallEndIn={log.smallEndIn} barkIn={(log.smallEndIn * (bark - 1)) / 2} seed={log.species} frameIn={frameIn} sizePx={232} label={`Small end to scale: ${sayInches(log.smallEndIn, units)} inside bark`} />
        <svg
          className={drawing ? 'log-drawing absolute inset-0 h-full w-full cursor-crosshair touch-none' : 'log-drawing pointer-events-none absolute inset-0 h-full w-full'}
          viewBox={`${-frameIn / 2} ${-frameIn / 2} ${frameIn} ${frameIn}`} aria-hidden="true"
          onPointerDown={(event) => { event.currentTarget.setPointerCapture(event.pointerId); start.current = point(event); setBox(null); setSlice(null); }}
          onPointerMove={move} onPointerUp={finish} onPointerCancel={() => { start.current = null; }}
        >
          {(log.defects ?? []).map((defect, index) => <DefectOnEnd key={index} defect={defect} radiusIn={log.smallEndIn / 2} drawn={box} slice={slice} />)}
          {drawing === 'wedge' && slice && <path className="log-rot" d={sector(log.smallEndIn / 2, slice)} />}
          {drawing === 'rot' && box && <rect className="log-rot" {...box} />}
        </svg>
      </div>
      <p className="no-print mt-1 flex flex-wrap justify-center gap-x-4">
        <Button kind="quiet" aria-pressed={drawing === 'rot'} onClick={() => setDrawing(drawing === 'rot' ? null : 'rot')}>{drawing === 'rot' ? 'Now drag a box over the rot' : 'Draw rot on the log end'}</Button>
        <Button kind="quiet" aria-pressed={drawing === 'wedge'} onClick={() => setDrawing(drawing === 'wedge' ? null : 'wedge')}>{drawing === 'wedge' ? 'Now drag from one side of the scar to the other' : 'Draw a scar or seam'}</Button>
      </p>
      <LogSide
        lengthFt={log.lengthFt} smallEndIn={log.smallEndIn} largeEndIn={large}
        cutsFt={scaled.segments.slice(1).map((segment) => segment.startFt)}
        pieces={scaled.segments.map((segment) => ({ startFt: segment.startFt, lengthFt: segment.lengthFt, label: `${segment.lengthFt} ft` }))}
        waste={[...(trim.trimIn > 0 ? [{ startFt: trim.nominalFt, lengthFt: log.lengthFt - trim.nominalFt }] : []), ...lost.map((lengthFt) => ({ startFt: log.lengthFt - lengthFt, lengthFt }))]}
        label={`Along its length: ${sayInches(log.smallEndIn, units)} at the small end, ${sayInches(large, units)} at the large end, ${sayFeet(log.lengthFt, units)} long`}
      />
      <figcaption className="mt-1 text-sm text-ink-soft">To scale; along its length the thickness is drawn twice. Shaded: trim and lost length.</figcaption>
    </figure>
  );
}
