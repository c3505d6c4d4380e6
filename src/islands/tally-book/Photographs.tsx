import { useEffect, useState, type ChangeEvent, type ReactElement } from 'react';
import { buttonKinds, gloveSize, join } from '~/components/classes.ts';
import { dropPicture, keepPicture, picturesOf, sendPictures } from '~/islands/day/pictures.ts';
import { onChange, type Picture } from '~/islands/day/store.ts';
import type { ShownOnTheDay } from '~/schemas/day-photo.ts';
import type { TallyView } from '~/schemas/tally-view.ts';
import { summaryClass } from './Beside.tsx';

export interface Photographs {
  /** Kept on this phone and not sent, oldest first. */
  readonly here: readonly Picture[];
  readonly trouble: string | null;
  readonly take: (shows: ShownOnTheDay, hitId: string | null, file: File) => void;
}

/** The photographs of a booking that wait on this phone, and a way to add one. */
export function usePhotographs(accountId: string, booking: number): Photographs {
  const [here, setHere] = useState<readonly Picture[]>([]);
  const [trouble, setTrouble] = useState<string | null>(null);
  useEffect(() => {
    const read = (): void => void picturesOf(accountId, booking).then(setHere);
    read();
    return onChange(read);
  }, [accountId, booking]);
  const take = (shows: ShownOnTheDay, hitId: string | null, file: File): void => {
    keepPicture({ accountId, booking, shows, hitId }, file).then(
      () => {
        setTrouble(null);
        sendPictures().catch(() => undefined);
      },
      () => setTrouble('This phone could not keep that photograph: its storage is full or shut. Make room and take it again.'),
    );
  };
  return { here, trouble, take };
}

interface TakeOneProps {
  readonly label: string;
  readonly onTake: (file: File) => void;
}

/** Opens the phone's camera, or its pictures. */
export function TakeOne({ label, onTake }: TakeOneProps): ReactElement {
  const chosen = (event: ChangeEvent<HTMLInputElement>): void => {
    for (const file of event.target.files ?? []) onTake(file);
    event.target.value = '';
  };
  return (
    <label className={join(buttonKinds.outlined, gloveSize, 'relative cursor-pointer focus-within:outline focus-within:outline-[3px] focus-within:outline-offset-2 focus-within:outline-crayon')}>
      {label}
      <input className="sr-only" type="file" accept="image/*" multiple onChange={chosen} />
    </label>
  );
}

/** Photographs of the boards, and what waits to be sent. */
export function BoardPhotographs({ view, photographs }: { readonly view: TallyView; readonly photographs: Photographs }): ReactElement {
  const { here, trouble, take } = photographs;
  const sent = view.photos.filter(({ id }) => !here.some((picture) => picture.id === id));
  return (
    <details open={here.length > 0}>
      <summary className={summaryClass}>Photographs · {sent.length + here.length}</summary>
      <p className="max-w-prose text-ink-soft">Of the boards and the stack. Only the two of you see them, on the booking. They are kept here and sent when there is signal, after the boards.</p>
      <p className="mt-2"><TakeOne label="Photograph the boards" onTake={(file) => take('boards', null, file)} /></p>
      {trouble && <p className="mt-2 border-l-4 border-heartwood pl-2 font-semibold text-heartwood" role="alert">{trouble}</p>}
      {here.length > 0 && <ul className="mt-3 grid grid-cols-2 gap-3">{here.map((picture) => <Kept key={picture.id} picture={picture} />)}</ul>}
    </details>
  );
}

/** A photograph that waits on this phone. */
export function Kept({ picture }: { readonly picture: Picture }): ReactElement {
  const [src, setSrc] = useState('');
  useEffect(() => {
    const address = URL.createObjectURL(new Blob([picture.bytes], { type: picture.type }));
    setSrc(address);
    return () => URL.revokeObjectURL(address);
  }, [picture.id]);
  const words = picture.shows === 'metal' ? 'Metal hit' : 'Boards';
  return (
    <li>
      {src && <img className="aspect-[4/3] w-full bg-sapwood object-cover" src={src} alt={words} />}
      <p>{words}: {picture.because === null ? 'saved here' : `not taken. ${picture.because}`}</p>
      <button type="button" className="px-2 font-semibold text-crayon underline" onClick={() => void dropPicture(picture.id)}>Drop it<span className="sr-only">: {words}</span></button>
    </li>
  );
}
