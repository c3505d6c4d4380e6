import type { ReactElement } from 'react';
import type { Caution } from '~/domain/timber/cautions.ts';

/** Cautions in plain words, each with its source. */
export function Cautions({ cautions }: { readonly cautions: readonly Caution[] }): ReactElement {
  return (
    <div className="border-l-4 border-amber pl-3">
      <p className="font-bold text-amber">Take care</p>
      <ul className="list-disc pl-5">
        {cautions.map((caution) => <li key={caution.text} className="mt-1">{caution.text} <span className="text-sm text-ink-soft">({caution.source})</span></li>)}
      </ul>
      <p className="mt-1 text-sm">Follow local codes, the equipment’s manual, and a licensed or trained professional.</p>
    </div>
  );
}
