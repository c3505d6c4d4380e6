import { useEffect, useRef, useState, type ReactElement } from 'react';
import { buttonKinds, gloveSize, join } from '~/components/classes.ts';
import { readSpokenBoards, type SpokenBoards } from '~/domain/trade/spoken-boards.ts';

/** The part of the browser's speech recognition that is used here; not every browser has it. */
interface Recognition {
  lang: string;
  maxAlternatives: number;
  onresult: ((event: { readonly results: ArrayLike<ArrayLike<{ readonly transcript: string }>> }) => void) | null;
  onerror: ((event: { readonly error: string }) => void) | null;
  onend: (() => void) | null;
  start: () => void;
  abort: () => void;
}
type MakesRecognition = new () => Recognition;

function recognition(): MakesRecognition | undefined {
  const { SpeechRecognition, webkitSpeechRecognition } = window as unknown as { readonly SpeechRecognition?: MakesRecognition; readonly webkitSpeechRecognition?: MakesRecognition };
  return SpeechRecognition ?? webkitSpeechRecognition;
}

const troubles: Readonly<Record<string, string>> = {
  'not-allowed': 'The microphone is not allowed here. Use the buttons, or allow it in the browser’s settings.',
  'no-speech': 'Nothing was heard. Try again, closer to the phone.',
  network: 'This browser listens only with signal. Use the buttons.',
};

interface VoiceProps {
  readonly name: (boards: SpokenBoards) => string;
  readonly onAdd: (boards: SpokenBoards) => void;
}

/** Boards by voice, where the browser has it: an extra beside the buttons. What was understood is shown and waits for a tap, because the count is money. */
export function Voice({ name, onAdd }: VoiceProps): ReactElement | null {
  const [has, setHas] = useState(false);
  const [listening, setListening] = useState(false);
  const [heard, setHeard] = useState<{ readonly said: string; readonly boards: SpokenBoards | null } | null>(null);
  const [trouble, setTrouble] = useState<string | null>(null);
  const running = useRef<Recognition | null>(null);
  useEffect(() => {
    setHas(recognition() !== undefined);
    return () => running.current?.abort();
  }, []);
  const listen = (): void => {
    const Made = recognition();
    if (!Made) return;
    const ear = new Made();
    running.current = ear;
    ear.lang = 'en-US';
    ear.maxAlternatives = 5;
    ear.onresult = ({ results }) => {
      const said = Array.from(results[0] ?? []).map(({ transcript }) => transcript);
      // The first of what it may have been that makes sense as boards.
      const understood = said.find((one) => readSpokenBoards(one) !== null);
      setHeard({ said: understood ?? said[0] ?? '', boards: understood === undefined ? null : readSpokenBoards(understood) });
    };
    ear.onerror = ({ error }) => setTrouble(troubles[error] ?? 'That could not be heard. Use the buttons.');
    ear.onend = () => setListening(false);
    setHeard(null);
    setTrouble(null);
    setListening(true);
    ear.start();
  };
  if (!has) return null;
  return (
    <div className="mt-3">
      <button type="button" className={join(buttonKinds.outlined, gloveSize, 'w-full')} aria-pressed={listening} onClick={() => (listening ? running.current?.abort() : listen())}>{listening ? 'Listening · tap to stop' : 'Say the boards'}</button>
      <div role="status">
        {!heard && !trouble && listening && <p className="mt-1">Say, for instance: five quarter by eight by ten, three.</p>}
        {trouble && <p className="mt-1 font-semibold">{trouble}</p>}
        {heard && !heard.boards && <p className="mt-1 font-semibold">Heard “{heard.said}”, which is not a size. Say thickness by width by length, then how many.</p>}
        {heard?.boards && <p className="mt-1">Heard “{heard.said}”.</p>}
      </div>
      {heard?.boards && (
        <div className="mt-2 flex flex-wrap gap-2">
          <button type="button" className={join(buttonKinds.primary, gloveSize, 'flex-1')} onClick={() => (heard.boards && onAdd(heard.boards), setHeard(null))}>Add {heard.boards.count} of {name(heard.boards)}</button>
          <button type="button" className={join(buttonKinds.outlined, gloveSize)} onClick={() => setHeard(null)}>No</button>
        </div>
      )}
    </div>
  );
}
