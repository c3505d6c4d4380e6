import { useEffect, useRef, type ReactElement } from 'react';
import { sendPictures } from '~/islands/day/pictures.ts';
import { refresh } from '~/islands/day/send.ts';
import { holderOf } from '~/islands/day/store.ts';
import { Kept, TakeOne, usePhotographs } from './Photographs.tsx';

/** Sends what waits: what an earlier visit could not, too. A browser that keeps nobody's days yet asks for them first. */
async function sendWaiting(): Promise<void> {
  if (!(await holderOf())) await refresh();
  await sendPictures();
}

interface AddPhotographsProps {
  readonly accountId: string;
  readonly booking: number;
}

/** Adds photographs of the boards from any phone or desk of either side: kept here first, sent when there is signal. */
export function AddPhotographs({ accountId, booking }: AddPhotographsProps): ReactElement {
  const { here, trouble, take } = usePhotographs(accountId, booking);
  const waited = useRef(false);
  useEffect(() => {
    const send = (): void => void sendWaiting().catch(() => undefined);
    send();
    window.addEventListener('online', send);
    return () => window.removeEventListener('online', send);
  }, []);
  useEffect(() => {
    // All sent: the page, which the server makes, shows them.
    if (waited.current && here.length === 0) location.reload();
    waited.current = here.length > 0;
  }, [here.length]);
  return (
    <div>
      <p><TakeOne label="Add photographs" onTake={(file) => take('boards', null, file)} /></p>
      {trouble && <p className="mt-2 border-l-4 border-heartwood pl-2 font-semibold text-heartwood" role="alert">{trouble}</p>}
      <div role="status">{here.length > 0 && <p className="mt-3">{here.length === 1 ? 'One is' : `${here.length} are`} saved here and not sent yet.</p>}</div>
      {here.length > 0 && <ul className="mt-2 grid grid-cols-2 gap-3 sm:grid-cols-3">{here.map((picture) => <Kept key={picture.id} picture={picture} />)}</ul>}
    </div>
  );
}
