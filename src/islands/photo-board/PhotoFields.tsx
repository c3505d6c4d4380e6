import { useEffect, useRef, useState, type ReactElement } from 'react';
import { longestCaption, type PhotoView } from '~/domain/photo.ts';
import { Field, Select } from '~/islands/form/fields.tsx';

interface Props {
  readonly photo: PhotoView;
  readonly logs: readonly { readonly id: string; readonly label: string }[];
  readonly name: string;
  readonly onChange: (change: { readonly caption?: string; readonly logId?: string | null }) => Promise<void>;
}

const PAUSE_MS = 1200;

/** Caption and log of a photograph, each kept as soon as it is said. What was typed stays when keeping fails. */
export function PhotoFields({ photo, logs, name, onChange }: Props): ReactElement {
  const [caption, setCaption] = useState(photo.caption);
  const [kept, setKept] = useState<'nothing yet' | 'kept'>('nothing yet');
  const [trouble, setTrouble] = useState<string | null>(null);
  const sent = useRef(photo.caption);
  const timer = useRef<ReturnType<typeof setTimeout> | undefined>(undefined);

  const keep = (change: Parameters<Props['onChange']>[0]): void => {
    onChange(change).then(
      () => {
        setKept('kept');
        setTrouble(null);
      },
      (error: unknown) => {
        if (change.caption !== undefined) sent.current = '\u0000';
        setTrouble(`Not kept yet. ${error instanceof Error ? error.message : 'Try again.'}`);
      },
    );
  };
  const keepCaption = (text: string): void => {
    clearTimeout(timer.current);
    if (text.trim() === sent.current) return;
    sent.current = text.trim();
    keep({ caption: text.trim() });
  };
  useEffect(() => () => clearTimeout(timer.current), []);

  return (
    <div className="mt-2 grid gap-3 sm:grid-cols-2">
      <Field
        name={`photo-${photo.id}-caption`} label="Caption" aria-label={`Caption of ${name}`} maxLength={longestCaption} value={caption} autoComplete="off"
        onChange={(event) => {
          const text = event.target.value;
          setCaption(text);
          setKept('nothing yet');
          clearTimeout(timer.current);
          timer.current = setTimeout(() => keepCaption(text), PAUSE_MS);
        }}
        onBlur={() => keepCaption(caption)}
        onKeyDown={(event) => {
          if (event.key === 'Enter') keepCaption(caption);
        }}
        {...(trouble ? { error: trouble } : {})}
      />
      {logs.length > 0 && (
        <Select
          name={`photo-${photo.id}-log`} label="Shows" aria-label={`Shows, for ${name}`} value={photo.logId ?? ''}
          options={[{ value: '', label: 'The landing, or all logs' }, ...logs.map(({ id, label }) => ({ value: id, label }))]}
          onChange={(event) => keep({ logId: event.target.value === '' ? null : event.target.value })}
        />
      )}
      <p className="text-sm text-ink-soft empty:hidden" role="status">{kept === 'kept' ? 'Kept' : ''}</p>
    </div>
  );
}
