import type { ReactElement } from 'react';
import { cautionSource, type CautionText } from '~/domain/cautions.ts';

/** Cautions in plain words, each with its source. */
export function Cautions({ cautions }: { readonly cautions: readonly CautionText[] }): ReactElement {
  return (
    <div className="border-l-4 border-amber pl-3">
      <p className="font-bold text-amber">Take care</p>
      <ul className="list-disc pl-5">
        {cautions.map((caution) => <li key={caution.title} className="mt-1"><b>{caution.title}</b> {caution.text} <span className="text-sm text-ink-soft">{cautionSource(caution)}</span></li>)}
      </ul>
      <p className="mt-1 text-sm">Follow local codes, the equipment’s manual, and a licensed or trained professional.</p>
    </div>
  );
}
