import { useEffect, useState, type ReactElement } from 'react';
import { paths } from '~/domain/paths.ts';
import { dayAt, formatDay } from '~/domain/time.ts';
import { DayBooking } from './DayBooking.tsx';
import { signInAgain, type Sending } from './send.ts';
import type { Day as KeptDay } from './use-day.ts';
import { useDay } from './use-day.ts';
import type { KeptBooking } from './store.ts';
import { dayAndTime } from '../clock.ts';

const bookingInAddress = (): number | null => (/^#\d{1,9}$/.test(location.hash) ? Number(location.hash.slice(1)) : null);
const pageWanted = (): string | null => new URLSearchParams(location.search).get('wanted');

/** The milling day on a phone: what is kept of the bookings to come, and the tally book, with or without signal. */
export function Day(): ReactElement {
  const { day, heard, shut } = useDay();
  const [open, setOpen] = useState<number | null>(null);
  const [wanted, setWanted] = useState<string | null>(null);
  useEffect(() => {
    const look = (): void => setOpen(bookingInAddress());
    look();
    setWanted(pageWanted());
    window.addEventListener('hashchange', look);
    return () => window.removeEventListener('hashchange', look);
  }, []);

  if (shut) return <Words title="This browser keeps nothing">The milling day needs the browser’s own storage, which is shut here. A private window often shuts it: open Skidway in a usual one.</Words>;
  if (!day) return <p className="px-4 py-8 text-ink-soft" role="status">Looking at what is kept on this phone.</p>;
  if (!day.holder) return <Nobody heard={heard} />;
  const booking = day.bookings.find(({ number }) => number === open);
  if (booking) return <DayBooking key={booking.number} booking={booking} />;
  return (
    <div className="mx-auto max-w-[34rem] px-4 pb-12" data-ready="true" data-outdoors>
      {wanted && heard !== 'sent' && <p className="mt-4 border-l-4 border-amber bg-sheet px-3 py-2" role="status">That page needs signal. This is what is kept on the phone.</p>}
      <h1 className="mt-6">Your milling days</h1>
      <KeptLine day={day} heard={heard} />
      {day.bookings.length === 0 ? (
        <p className="mt-6 max-w-prose">No milling day lies ahead. A booking shows here once its money is held. <a href={paths.bookings}>All bookings</a></p>
      ) : (
        <ul className="mt-4 border-t border-rule">{day.bookings.map((one) => <Row key={one.number} booking={one} />)}</ul>
      )}
      <p className="mt-6"><a className="inline-flex min-h-glove items-center font-semibold" href={paths.estimator}>Log estimator</a></p>
    </div>
  );
}

const stateWords: Readonly<Record<string, string>> = { sawing: 'Sawing', tallied: 'Tally offered', queried: 'Tally queried', signed: 'Signed', settled: 'Settled' };

function Row({ booking }: { readonly booking: KeptBooking }): ReactElement {
  const today = booking.days.includes(dayAt(new Date(), booking.timeZone));
  return (
    <li className="border-b border-rule">
      <a className="block min-h-glove py-3 text-ink no-underline" href={`#${booking.number}`}>
        <span className="block font-bold text-crayon underline underline-offset-4">{booking.title}</span>
        <span className="block">{today ? 'Today' : booking.days.map(formatDay).join(', ')} · {booking.otherName} · {booking.town}</span>
        {booking.status !== 'held' && <span className="block font-semibold text-moss">{stateWords[booking.status] ?? booking.status}</span>}
      </a>
    </li>
  );
}

/** Whose days these are, when they were kept, and what has not been sent. */
function KeptLine({ day, heard }: { readonly day: KeptDay; readonly heard: Sending | null }): ReactElement | null {
  const { holder, unsent } = day;
  if (!holder) return null;
  return (
    <div className="mt-1 text-ink-soft" role="status" data-testid="kept">
      <p>{holder.name}. Saved on this phone {dayAndTime(holder.heardAt)}{heard === 'no-signal' ? '; no signal now' : ''}.</p>
      {Math.abs(holder.clockOffMs) > 5 * 60_000 && <p>This phone’s clock is {Math.round(Math.abs(holder.clockOffMs) / 60_000)} minutes {holder.clockOffMs > 0 ? 'slow' : 'fast'}. Hours entered here follow it: check them before you offer the tally.</p>}
      {unsent > 0 && <p className="font-semibold text-ink">{unsent} {unsent === 1 ? 'entry is' : 'entries are'} saved here and not sent yet.</p>}
      {(holder.signedOut || heard === 'signed-out') && <p className="font-semibold text-ink">You are signed out. <a href={signInAgain}>Sign in again</a> to send and to see what is new.</p>}
    </div>
  );
}

/** Nobody's days are kept: either nobody has signed in on this phone, or there has been no signal since. */
function Nobody({ heard }: { readonly heard: Sending | null }): ReactElement {
  if (heard === null) return <p className="px-4 py-8 text-ink-soft" role="status">Asking for your milling days.</p>;
  if (heard === 'no-signal') return <Words title="No signal, and nothing kept yet">Open this page once where there is signal, the evening before at the latest: your milling days are then kept on the phone. The <a href={paths.estimator}>log estimator</a> works here without signal.</Words>;
  return <Words title="Your milling days">Sign in once where there is signal, and your milling days are kept on this phone. <a className="font-bold" href={signInAgain}>Sign in</a></Words>;
}

function Words({ title, children }: { readonly title: string; readonly children: React.ReactNode }): ReactElement {
  return (
    <div className="mx-auto max-w-[34rem] px-4 pb-12" data-ready="true" data-outdoors>
      <h1 className="mt-6">{title}</h1>
      <p className="mt-3 text-lg">{children}</p>
    </div>
  );
}
