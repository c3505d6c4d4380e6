import { useState, type ReactElement, type ReactNode } from 'react';
import { buttonKinds, gloveSize, join } from '~/components/classes.ts';
import { Field } from '~/islands/form/fields.tsx';
import { SignaturePad } from './SignaturePad.tsx';

/** Name and drawn signature, as entries carry them. */
export interface Word {
  readonly name: string;
  readonly signature: string;
}

interface LandownersWordProps {
  /** Makes the fields' names differ when several are on a page. */
  readonly id: string;
  readonly action: string;
  /** What is signed for, read before the name. */
  readonly children: ReactNode;
  /** Asks for the landowner's code, which only they know. */
  readonly withCode?: boolean;
  /** The landowner's own phone: they are spoken to. */
  readonly own?: boolean;
  readonly onSign: (word: Word, code: string | null) => void;
}

/** The landowner reads, writes their name and signs with a finger: on the sawyer's phone, handed over, or on their own. */
export function LandownersWord({ id, action, children, withCode = false, own = false, onSign }: LandownersWordProps): ReactElement {
  const [name, setName] = useState('');
  const [code, setCode] = useState('');
  const [path, setPath] = useState('');
  const [tried, setTried] = useState(false);
  const problems = {
    name: tried && name.trim() === '' ? 'Write your name.' : undefined,
    code: tried && withCode && !/^\d{6}$/.test(code.trim()) ? 'Six figures, from your booking’s page or the letter of the evening before.' : undefined,
    path: tried && path === '' ? 'Sign in the field above.' : undefined,
  };
  const sign = (): void => {
    setTried(true);
    if (name.trim() === '' || path === '' || (withCode && !/^\d{6}$/.test(code.trim()))) return;
    onSign({ name: name.trim(), signature: path }, withCode ? code.trim() : null);
  };
  return (
    <form className="mt-3 grid gap-4 border-2 border-ink bg-paper p-4" onSubmit={(event) => (event.preventDefault(), sign())}>
      <div>{children}</div>
      <Field name={`word-${id}`} label={own ? 'Your name' : 'Landowner’s name'} autoComplete={own ? 'name' : 'off'} value={name} error={problems.name} onChange={(event) => setName(event.target.value)} />
      {withCode && <Field name={`code-${id}`} label="Landowner’s signing code" hint="Only the landowner has it. Without it, they sign on their own phone or at home." inputMode="numeric" autoComplete="off" figure width="short" maxLength={6} value={code} error={problems.code} onChange={(event) => setCode(event.target.value)} />}
      <SignaturePad path={path} onChange={setPath} />
      {problems.path && <p className="border-l-4 border-heartwood pl-2 font-semibold text-heartwood" role="alert">{problems.path}</p>}
      <button type="submit" className={join(buttonKinds.primary, gloveSize, 'w-full')}>{action}</button>
    </form>
  );
}
