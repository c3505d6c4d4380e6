import { useState, type ReactElement } from 'react';
import { formatCents } from '~/domain/money.ts';
import { hashOf } from '~/islands/day/content-hash.ts';
import { LandownersWord, type Word } from '~/islands/day/LandownersWord.tsx';
import type { TallyEntry } from '~/schemas/tally-entries.ts';
import type { TallyView } from '~/schemas/tally-view.ts';
import { summaryClass } from './Beside.tsx';

interface RainStopProps {
  readonly view: TallyView;
  readonly costCents: number;
  /** On the landowner's own phone. */
  readonly own?: boolean;
  readonly add: (...entries: TallyEntry[]) => void;
}

/** Rain stops the saw: what is sawn is signed and stands, and the job goes on another day without a new payment. */
export function RainStop({ view, costCents, own = false, add }: RainStopProps): ReactElement {
  const [again, setAgain] = useState(false);
  const signPart = async ({ name, signature }: Word): Promise<void> => add({ kind: 'part', id: crypto.randomUUID(), sha256: await hashOf(view), name, signature });
  const setUp = view.terms.card.setUpPerLanding;
  return (
    <details>
      <summary className={summaryClass}>Rain, or a second day · {view.parts.length === 0 ? 'nothing signed yet' : `${view.parts.length} signed`}</summary>
      <div className="pb-3">
        <p className="text-ink-soft">What is sawn so far is signed and stands. Agree on the next day on the booking’s page; nothing is paid again.</p>
        {view.parts.map((part) => <p key={part.id} className="mt-2">Signed by {part.name}: {part.lineIds.length} {part.lineIds.length === 1 ? 'line' : 'lines'}{part.costCents === null ? '' : `, ${formatCents(part.costCents)}`}.</p>)}
        {view.boards.length > 0 && (
          <LandownersWord id="part" action="Sign what is sawn so far" own={own} onSign={(word) => void signPart(word)}>
            <p>The work so far comes to {formatCents(costCents)}. These lines stand; the rest is counted on the next day.</p>
          </LandownersWord>
        )}
        {view.parts.length > 0 && setUp > 0 && (again ? (
          <LandownersWord id="set-up" action={`Agree to another set-up, ${formatCents(setUp)}`} own={own} onSign={({ name, signature }) => (add({ kind: 'allow', id: crypto.randomUUID(), what: 'set-up-again', logId: null, limitCents: null, name, signature }), setAgain(false))}>
            <p>The mill was taken away and is set up again: {formatCents(setUp)} more.</p>
          </LandownersWord>
        ) : <button type="button" className="mt-2 min-h-glove font-bold text-crayon underline" onClick={() => setAgain(true)}>The mill is set up again</button>)}
      </div>
    </details>
  );
}
