import type { ReactElement } from 'react';
import { buttonKinds, gloveSize, join } from '~/components/classes.ts';
import { formatCents } from '~/domain/money.ts';
import { paths } from '~/domain/paths.ts';
import { BoardPhotographs, usePhotographs } from '~/islands/tally-book/Photographs.tsx';
import { countView } from '~/islands/tally-book/count.ts';
import { RainStop } from '~/islands/tally-book/RainStop.tsx';
import { ChangedEstimate, Stops } from '~/islands/tally-book/Stops.tsx';
import { useTallyQueue } from '~/islands/tally-book/use-tally-queue.ts';
import type { TallyView } from '~/schemas/tally-view.ts';
import { dayAndTime } from '../clock.ts';
import { Signed, SignTheTally, TallyToSign } from './OfferAndSign.tsx';
import { savedWords, SendingTrouble } from './SavedLine.tsx';
import type { KeptBooking } from './store.ts';

/**
 * The day on the landowner's own phone: the tally as it was last seen, what they are asked, and their signature. Without signal it is
 * read as it was last heard; what they allow or sign is kept here and sent later.
 */
export function LandownersDay({ view: initial, booking }: { readonly view: TallyView; readonly booking: KeptBooking }): ReactElement {
  const queue = useTallyQueue(initial, booking.accountId, false);
  const { view, add } = queue;
  const photographs = usePhotographs(booking.accountId, booking.number);
  const counted = countView(view);
  const begun = view.status !== 'held';
  return (
    <div className="mx-auto max-w-[34rem] px-4">
      <p className="mt-2 bg-ink px-3 py-2 font-semibold text-paper" role="status" data-testid="saved">{savedWords(queue)}</p>
      <SendingTrouble queue={queue} />
      {!begun && <p className="mt-3">Sawing has not begun. From the first board on, the tally stands here as {booking.otherName}’s phone sends it.</p>}
      {begun && (
        <section className="mt-4" aria-labelledby="the-tally">
          <h1 id="the-tally">The tally</h1>
          <p className="text-ink-soft">As {booking.otherName} has sent it{queue.heardAt && `; last heard here ${dayAndTime(queue.heardAt)}`}.</p>
          {view.status === 'sawing' && (
            <>
              <div className="mt-3 flex flex-wrap items-end justify-between gap-x-4">
                <div><p>Sawn so far</p><p className="figure">{formatCents(counted.job.costCents)} <span className="text-ink-soft">of {formatCents(counted.limitCents)} {counted.limitCents > view.heldCents ? 'allowed' : 'held'}</span></p></div>
                <p className="figure text-4xl font-bold" data-testid="sawn-so-far">{Number(counted.boardFeet.toFixed(2)).toLocaleString('en-US')} bf</p>
              </div>
              <Stops {...{ view, counted, add }} logs={view.logs} own />
            </>
          )}
          <ChangedEstimate view={view} />
          {(view.status !== 'sawing' || view.boards.length > 0) && (
            view.status === 'tallied' ? <TallyToSign view={view} /> : <details className="mt-2" open={view.status !== 'sawing'}><summary className="flex min-h-glove cursor-pointer items-center border-t border-rule text-lg font-bold text-crayon">By log and size, and what it comes to</summary><TallyToSign view={view} /></details>
          )}
          {view.status === 'tallied' && (
            <section className="mt-6" aria-labelledby="sign-here-own">
              <h2 id="sign-here-own">Sign it here, now or at home</h2>
              <p className="mt-1">Read it by log and by size first. Without signal your signature is kept on this phone and sent later; it holds for exactly these lines, and you are asked again if they change.</p>
              <SignTheTally queue={queue} own />
              <p className="mt-3"><a className={join(buttonKinds.outlined, gloveSize, 'w-full')} href={paths.signTally(booking.number)}>Something is wrong: query lines (needs signal)</a></p>
            </section>
          )}
          {view.status === 'queried' && <p className="mt-4 border-l-4 border-amber bg-sheet px-3 py-2 font-semibold">Lines are queried. <a href={paths.signTally(booking.number)}>Read the queries and their answers</a> (needs signal).</p>}
          {(view.status === 'signed' || view.status === 'settled') && <Signed queue={queue} />}
          <div className="mt-6">
            <BoardPhotographs {...{ view, photographs }} />
            {view.status === 'sawing' && <RainStop {...{ view, add }} costCents={counted.job.costCents} own />}
          </div>
        </section>
      )}
    </div>
  );
}
