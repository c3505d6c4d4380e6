import { useRef, useState, type PointerEvent, type ReactElement } from 'react';

interface SignaturePadProps {
  /** The signature so far as an SVG path of whole numbers; empty while nothing is drawn. */
  readonly path: string;
  readonly onChange: (path: string) => void;
}

const WIDE = 1000;
const HIGH = 400;
/** Nearer than this, a point adds nothing to the line. */
const LEAST_STEP = 6;

/** A field to sign in with a finger. Strokes are kept, not a picture: they draw sharply at any size and weigh little. */
export function SignaturePad({ path, onChange }: SignaturePadProps): ReactElement {
  const field = useRef<SVGSVGElement>(null);
  const last = useRef<readonly [number, number] | null>(null);
  const [drawing, setDrawing] = useState(path);
  const at = (event: PointerEvent): readonly [number, number] => {
    const box = field.current?.getBoundingClientRect();
    if (!box) return [0, 0];
    const within = (value: number, most: number): number => Math.round(Math.min(most, Math.max(0, value)));
    return [within(((event.clientX - box.left) / box.width) * WIDE, WIDE), within(((event.clientY - box.top) / box.height) * HIGH, HIGH)];
  };
  const down = (event: PointerEvent<SVGSVGElement>): void => {
    event.currentTarget.setPointerCapture(event.pointerId);
    const point = at(event);
    last.current = point;
    setDrawing((before) => `${before}M${point[0]} ${point[1]}`);
  };
  const move = (event: PointerEvent): void => {
    if (!last.current) return;
    const point = at(event);
    if (Math.hypot(point[0] - last.current[0], point[1] - last.current[1]) < LEAST_STEP) return;
    last.current = point;
    setDrawing((before) => `${before}L${point[0]} ${point[1]}`);
  };
  const up = (): void => {
    if (!last.current) return;
    last.current = null;
    onChange(drawing);
  };
  return (
    <div>
      <p className="font-semibold" id="sign-here">Sign here with a finger</p>
      <svg ref={field} viewBox={`0 0 ${WIDE} ${HIGH}`} role="img" aria-labelledby="sign-here" data-testid="signature" className="mt-1 aspect-[5/2] w-full touch-none select-none border-2 border-ink bg-sheet" onPointerDown={down} onPointerMove={move} onPointerUp={up} onPointerCancel={up}>
        <line x1="60" y1="320" x2="940" y2="320" className="stroke-rule" strokeWidth="4" />
        <path d={drawing} fill="none" className="stroke-ink" strokeWidth="8" strokeLinecap="round" strokeLinejoin="round" />
      </svg>
      <button type="button" className="min-h-glove font-semibold text-crayon underline" onClick={() => (setDrawing(''), onChange(''))}>Clear and sign again</button>
    </div>
  );
}
