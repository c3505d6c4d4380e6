import { useEffect, useState, type ReactElement } from 'react';
import { formatFraction } from '~/domain/measure.ts';
import type { Said } from '~/domain/listing/page-words.ts';
import { formatDay, formatInstant } from '~/domain/time.ts';
import { measuresSaid } from '~/domain/trade/day-logs.ts';
import { TallyPad } from '~/islands/tally-book/TallyBook.tsx';
import { useTallyQueue } from '~/islands/tally-book/use-tally-queue.ts';
import type { TallyView } from '~/schemas/tally-view.ts';
import { CheckList } from './CheckList.tsx';
import { useCutSheet } from './cut-sheets.ts';
import { LandownersDay } from './LandownersDay.tsx';
import { OfferAndSign } from './OfferAndSign.tsx';
import { entriesOf, putEntries } from './queue.ts';
import { savedWords, SendingTrouble } from './SavedLine.tsx';
import { sendAll } from './send.ts';
import { database, onChange, type KeptBooking } from './store.ts';

/** Where the work stands on this phone: the check-list may have been gone through without signal. */
function useKeptTally(booking: KeptBooking): { readonly view: TallyView | null; readonly begun: boolean } {
  const [kept, setKept] = useState<{ view: TallyView | null; begun: boolean }>({ view: null, begun: false });
  useEffect(() => {
    const read = async (): Promise<void> => {
      const { waiting } = await entriesOf(booking.accountId, booking.number);
      const view = await (await database()).get('tally', [booking.accountId, booking.number]);
      setKept({ view: view ?? null, begun: view?.status !== 'held' || waiting.some(({ entry }) => entry.kind === 'start') });
    };
    void read();
    return onChange(() => void read());
  }, [booking.accountId, booking.number]);
  return kept;
}

/** One booking of the day: where, who, the ground and the logs; then the check-list and the tally book. */
export function DayBooking({ booking }: { readonly booking: KeptBooking }): ReactElement {
  const { view, begun } = useKeptTally(booking);
  const start = (): void => void putEntries(booking.accountId, booking.number, [{ kind: 'start', id: crypto.randomUUID() }]).then(sendAll);
  const mine = booking.side === 'sawyer';
  return (
    <div data-ready={view ? 'true' : undefined} data-outdoors>
      <nav className="mx-auto max-w-[34rem] px-4" aria-label="Back"><a className="inline-flex min-h-glove items-center" href="#">All milling days</a></nav>
      {view && mine && begun && <DayTally view={view} booking={booking} />}
      {view && !mine && <LandownersDay view={view} booking={booking} />}
      <div className={`mx-auto max-w-[34rem] px-4 pb-12${mine && begun ? ' pt-10' : ''}`}>
        <Title second={begun && !mine}>{booking.title}</Title>
        <p className="mt-1">{booking.startsAt ? `${booking.days.map(formatDay).join(', ')}. Starts ${formatInstant(new Date(booking.startsAt), booking.timeZone)}.` : 'No day yet.'}</p>
        {mine && view && !begun && <CheckList place={booking.place} onStart={start} />}
        {!mine && booking.signingCode && <p className="mt-4">To sign on {booking.otherName}’s phone: <span className="figure text-2xl font-bold">{booking.signingCode}</span>. Keep it to yourself until you sign.</p>}
        {!begun && <Ready booking={booking} />}
        <Facts booking={booking} />
        {view && <Logs view={view} />}
      </div>
    </div>
  );
}

/** The sawyer's part of the day: the tally book while there is something to enter, then the offer and the signature. */
function DayTally({ view, booking }: { readonly view: TallyView; readonly booking: KeptBooking }): ReactElement {
  const queue = useTallyQueue(view, booking.accountId, false);
  const enters = queue.view.status === 'sawing' || queue.view.status === 'queried';
  return (
    <>
      {enters && <TallyPad queue={queue} />}
      <div className="mx-auto max-w-[34rem] px-4">
        {!enters && <><p className="mt-2 bg-ink px-3 py-2 font-semibold text-paper" role="status" data-testid="saved">{savedWords(queue)}</p><SendingTrouble queue={queue} /></>}
        <OfferAndSign queue={queue} otherName={booking.otherName} />
      </div>
    </>
  );
}

/** The page's own heading, under the tally's once that is there. */
const Title = ({ second, children }: { readonly second: boolean; readonly children: string }): ReactElement =>
  second ? <h2 className="mt-10 text-2xl">{children}</h2> : <h1 className="mt-2">{children}</h1>;

/** Whether the cut sheet has come, in words that end the line. */
function SheetHere({ booking }: { readonly booking: KeptBooking }): ReactElement {
  const { sheet } = useCutSheet(booking.accountId, booking.number);
  return <>{sheet ? ' and the cut sheet with its drawings' : '. The cut sheet is not here yet: leave this page open with signal'}</>;
}

/** What this side has ready the evening before; and what of the day is on the phone. */
function Ready({ booking }: { readonly booking: KeptBooking }): ReactElement {
  return (
    <section className="mt-8" aria-labelledby="ready">
      <h2 id="ready">Ready the evening before</h2>
      <ul className="mt-1 border-t border-rule">{booking.ready.map((line) => <li key={line} className="border-b border-rule py-2">{line}</li>)}</ul>
      <p className="mt-2" data-testid="on-this-phone">On this phone: the place, the logs{booking.side === 'sawyer' ? <>, the tally book<SheetHere booking={booking} /></> : ' and the tally as it is sent'}.</p>
    </section>
  );
}

function Facts({ booking }: { readonly booking: KeptBooking }): ReactElement {
  const { place } = booking;
  return (
    <>
      <h2 className="mt-8">{booking.side === 'sawyer' ? 'Landowner' : 'Sawyer'}</h2>
      <p className="mt-1">{booking.otherName} · <a className="inline-flex min-h-target items-center" href={`mailto:${booking.otherEmail}`}>{booking.otherEmail}</a></p>
      <h2 className="mt-8">Place</h2>
      {place ? (
        <>
          <p className="figure mt-1 text-lg">{place.lat.toFixed(5)}, {place.lng.toFixed(5)}</p>
          <p><a className="inline-flex min-h-glove items-center" href={`geo:${place.lat},${place.lng}`}>Open in this phone’s map</a></p>
          {place.directions && <p className="whitespace-pre-line">{place.directions}</p>}
        </>
      ) : <p className="mt-1">{booking.town}</p>}
      <SaidList title="Access" said={booking.access} />
      <SaidList title="Landing" said={booking.landing} />
      <SaidList title="Tree" said={booking.tree} />
      {booking.note && <><h2 className="mt-8">Note</h2><p className="mt-1 whitespace-pre-line">{booking.note}</p></>}
    </>
  );
}

function SaidList({ title, said }: { readonly title: string; readonly said: readonly Said[] }): ReactElement | null {
  if (said.length === 0) return null;
  return (
    <>
      <h2 className="mt-8">{title}</h2>
      <dl className="mt-1 border-t border-rule">
        {said.map(({ label, value, note }) => (
          <div key={label} className="border-b border-rule py-2">
            <dt className="text-sm text-ink-soft">{label}</dt>
            <dd>{value}{note && <span className="block whitespace-pre-line text-ink-soft">{note}</span>}</dd>
          </div>
        ))}
      </dl>
    </>
  );
}

function Logs({ view }: { readonly view: TallyView }): ReactElement {
  return (
    <>
      <h2 className="mt-8">Logs</h2>
      <table className="ruled mt-1 w-full">
        <thead><tr><th scope="col">Log</th><th scope="col" className="num">Size</th><th scope="col" className="num">Intl ¼, bf</th></tr></thead>
        <tbody>{view.logs.map((log) => <tr key={log.id}><th scope="row" className="font-normal">{log.label}: {log.speciesName}</th><td className="num">{log.size}{log.measured && <span className="block text-ink-soft">listed {measuresSaid(log.listed)}</span>}</td><td className="num">{log.netBoardFeet.internationalQuarter}</td></tr>)}</tbody>
      </table>
      {view.cutList.length > 0 && (
        <>
          <h2 className="mt-8">Cut list</h2>
          <table className="ruled mt-1 w-full">
            <thead><tr><th scope="col">Piece</th><th scope="col" className="num">t × w, in</th><th scope="col" className="num">ft</th><th scope="col" className="num">Count</th></tr></thead>
            <tbody>{view.cutList.map((piece, index) => <tr key={index}><th scope="row" className="font-normal">{piece.label || 'Boards'}</th><td className="num">{formatFraction(piece.thicknessIn)} × {formatFraction(piece.widthIn)}</td><td className="num">{formatFraction(piece.lengthFt)}</td><td className="num">{piece.count}</td></tr>)}</tbody>
          </table>
        </>
      )}
    </>
  );
}
