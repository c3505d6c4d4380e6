import { useState, type ReactElement } from 'react';
import { buttonKinds, gloveSize, join } from '~/components/classes.ts';
import { checksBeforeSawing } from '~/domain/trade/day-checks.ts';

interface CheckListProps {
  readonly place: { readonly lat: number; readonly lng: number } | null;
  readonly onStart: () => void;
}

/** Gone through aloud before the first cut; sawing begins when every point is ticked. */
export function CheckList({ place, onStart }: CheckListProps): ReactElement {
  const [ticked, setTicked] = useState<ReadonlySet<number>>(new Set());
  const [short, setShort] = useState(false);
  const points = checksBeforeSawing(place);
  const toggle = (index: number): void => {
    const next = new Set(ticked);
    if (!next.delete(index)) next.add(index);
    setTicked(next);
  };
  return (
    <section className="mt-6" aria-labelledby="before-the-cut">
      <h2 id="before-the-cut">Before the first cut</h2>
      <p className="mt-1 text-ink-soft">Read each point aloud with whoever is helping. Nobody under 18 helps at the mill. The mill’s own manual and your local rules come first.</p>
      <ul className="mt-2 border-t border-rule">
        {points.map((text, index) => (
          <li key={text} className="border-b border-rule">
            <label className="flex min-h-glove cursor-pointer items-center gap-3 py-2">
              <input className="h-7 w-7 shrink-0 accent-crayon" type="checkbox" checked={ticked.has(index)} onChange={() => toggle(index)} />
              <span>{text}</span>
            </label>
          </li>
        ))}
      </ul>
      {short && ticked.size < points.length && <p className="mt-2 border-l-4 border-heartwood pl-2 font-semibold text-heartwood" role="alert">Go through every point before sawing begins.</p>}
      <button type="button" className={join(buttonKinds.primary, gloveSize, 'mt-4 w-full')} onClick={() => (ticked.size < points.length ? setShort(true) : onStart())}>Start sawing</button>
    </section>
  );
}
