import { useState, type ReactElement } from 'react';
import { buttonKinds, gloveSize, join } from '~/components/classes.ts';
import { formatCents } from '~/domain/money.ts';
import { correctionWords } from '~/domain/trade/clock.ts';
import { settle } from '~/domain/trade/settlement.ts';
import { countTally } from '~/domain/trade/tally-count.ts';
import { jobOf } from '~/domain/trade/day-job.ts';
import { bySize, countView } from '~/islands/tally-book/count.ts';
import { sizeName } from '~/islands/tally-book/size-name.ts';
import { useClock } from '~/islands/tally-book/use-clock.ts';
import type { TallyQueue } from '~/islands/tally-book/use-tally-queue.ts';
import type { TallyView } from '~/schemas/tally-view.ts';
import { hashOf } from './content-hash.ts';
import { LandownersWord, type Word } from './LandownersWord.tsx';
import { timeOfDay } from '../clock.ts';

/** All sawn: the tally is offered, and signed here and now if the landowner is here. Works without signal. */
export function OfferAndSign({ queue, otherName }: { readonly queue: TallyQueue; readonly otherName: string }): ReactElement | null {
  const { view, add } = queue;
  const [endedBySawyer, setEnded] = useState(false);
  const { running, turnTo } = useClock(queue);
  const hasLines = view.boards.length + view.culls.length + view.clock.length > 0;
  if (view.status === 'signed' || view.status === 'settled') return <Signed queue={queue} />;
  if (view.status === 'sawing') {
    return (
      <section className="mt-8 border-t border-rule pt-4" aria-labelledby="all-sawn">
        <h2 id="all-sawn">All sawn?</h2>
        <label className="mt-2 flex min-h-glove cursor-pointer items-center gap-3"><input className="h-7 w-7 shrink-0 accent-crayon" type="checkbox" checked={endedBySawyer} onChange={(event) => setEnded(event.target.checked)} />I am leaving early or broke down: charge the tally and the journey only</label>
        <button type="button" className={join(buttonKinds.primary, gloveSize, 'mt-3 w-full')} disabled={!hasLines && !running} onClick={() => (turnTo(null), add({ kind: 'offer', id: crypto.randomUUID(), endedBySawyer, note: '' }))}>{running ? 'Stop the clock and offer' : 'Offer'} the tally to {otherName}</button>
      </section>
    );
  }
  if (view.status !== 'tallied') return null;
  return (
    <section className="mt-8" aria-labelledby="sign-now">
      <h2 id="sign-now">{otherName} signs here, or at home</h2>
      <p className="mt-1">At home there are 72 hours, with a letter to answer. Here it is signed and settled today.</p>
      <TallyToSign view={view} />
      <SignTheTally queue={queue} />
    </section>
  );
}

/** What the tally comes to, as this phone counts it. */
export const moneyOf = (view: TallyView): ReturnType<typeof settle> =>
  settle(view.terms, countTally(view.terms, jobOf(view), view.logs), { heldCents: view.heldCents, feeBasisPoints: view.feeBasisPoints }, { endedBySawyer: view.endedBySawyer });

/** Where a signed tally stands: on this phone, or with the server. */
export const Signed = ({ queue }: { readonly queue: TallyQueue }): ReactElement => (
  <p className="mt-8 border-l-4 border-moss bg-sheet px-3 py-2 text-lg font-semibold" role="status">Signed. {queue.waiting > 0 ? 'The signature is kept on this phone and sent when signal returns; the money is then settled at once.' : queue.view.status === 'settled' ? 'The money is settled.' : 'It has been sent, and the money is being settled.'}</p>
);

/** The landowner's signature under what is on the screen; one under an older tally, which was refused, makes way for it. */
export function SignTheTally({ queue, own = false }: { readonly queue: TallyQueue; readonly own?: boolean }): ReactElement {
  const { view, add, drop } = queue;
  const settlement = moneyOf(view);
  const older = queue.refused.filter(({ entry }) => entry.kind === 'sign');
  const sign = async ({ name, signature }: Word, code: string | null): Promise<void> => {
    const sha256 = await hashOf(view);
    older.forEach(drop);
    add({ kind: 'sign', id: crypto.randomUUID(), sha256, code, name, signature });
  };
  return (
    <>
      {older.length > 0 && <p className="mt-3 border-l-4 border-amber bg-sheet px-3 py-2 font-semibold" role="alert">An earlier signature was not taken: {older[0]?.because}</p>}
      <LandownersWord id="sign" action="Sign the tally" withCode={!own} own={own} onSign={(word, code) => void sign(word, code)}>
        <p>By signing I accept this tally. {formatCents(settlement.payableCents)} is taken from the held money; {formatCents(settlement.refundCents)} goes back to my card.{settlement.overHold && ` It comes to ${formatCents(settlement.overHold.lackingCents)} more than is held: that is paid by a second checkout, or the sawyer accepts what is held. Nobody is charged on their own.`}</p>
      </LandownersWord>
    </>
  );
}

/** The tally as it is signed: by log and size, then the bill. */
export function TallyToSign({ view }: { readonly view: TallyView }): ReactElement {
  const { boardFeet } = countView(view);
  const settlement = moneyOf(view);
  const groups = [...view.logs.map(({ id, label }) => ({ id, label })), { id: null, label: 'Whole job' }].map((group) => ({ ...group, rows: bySize(view, view.boards.filter(({ logId }) => logId === group.id)) })).filter(({ rows }) => rows.length > 0);
  return (
    <>
      <p className="figure mt-4 text-3xl font-bold">{Number(boardFeet.toFixed(2)).toLocaleString('en-US')} bf</p>
      {groups.map((group) => (
        <table key={group.label} className="ruled mt-3 w-full">
          <caption className="text-left font-bold">{group.label}</caption>
          <thead><tr><th scope="col">Size</th><th scope="col" className="num">Count</th><th scope="col" className="num">bf</th></tr></thead>
          <tbody>{group.rows.map((row) => <tr key={row.key}><th scope="row" className="figure font-normal">{sizeName(view, row)}{row.kind === 'board' ? '' : ` (${row.kind === 'slab' ? 'slab' : 'out of size'})`}</th><td className="num">{row.count}</td><td className="num">{row.kind === 'board' ? Number(row.boardFeet.toFixed(2)) : '·'}</td></tr>)}</tbody>
        </table>
      ))}
      {view.clock.some(({ corrections }) => corrections?.length) && (
        <ul className="mt-3">
          {view.clock.filter(({ corrections }) => corrections?.length).map((entry) => <li key={entry.id} className="border-b border-rule py-1">Hours {timeOfDay(entry.startsAt)} to {timeOfDay(entry.endsAt)}{correctionWords(entry, (iso) => timeOfDay(iso))}</li>)}
        </ul>
      )}
      <table className="ruled mt-4 w-full">
        <caption className="text-left font-bold">What it comes to</caption>
        <tbody>
          {settlement.lines.map((line) => <tr key={line.label}><th scope="row" className="font-normal">{line.label}</th><td className="num">{formatCents(line.amountCents)}</td></tr>)}
          <tr><th scope="row">The work comes to</th><td className="num font-bold">{formatCents(settlement.costCents)}</td></tr>
          <tr><th scope="row" className="font-normal">Held</th><td className="num">{formatCents(view.heldCents)}</td></tr>
        </tbody>
      </table>
    </>
  );
}
