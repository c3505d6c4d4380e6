import { useRef, type ReactElement } from 'react';
import { useDropzone } from 'react-dropzone';
import { buttonKinds, join } from '~/components/classes.ts';
import { largestPhotoBytes, photoTypes } from '~/domain/photo.ts';

const endings = Object.values(photoTypes).flat().map((ending) => `.${ending}`);
const accepted = [...Object.keys(photoTypes), ...endings].join(',');

/** Where pictures are dropped or chosen. It takes whatever comes: each file that cannot be used says why in its own row. */
export function DropArea({ room, full, onFiles }: { readonly room: number; /** Why there is no room, in words that begin small. */ readonly full: string; readonly onFiles: (files: readonly File[], leftOut: number) => void }): ReactElement {
  const camera = useRef<HTMLInputElement>(null);
  const take = (files: readonly File[]): void => {
    if (files.length > 0) onFiles(files.slice(0, room), Math.max(0, files.length - room));
  };
  const { getRootProps, getInputProps, isDragActive, open } = useDropzone({ onDrop: take, noClick: true, noKeyboard: true, disabled: room <= 0 });
  // Our policy refuses styles written into the page, so the input is put away by a class.
  const { style: _hidden, ...input } = getInputProps();
  return (
    <div {...getRootProps()} className={join('border-2 border-dashed px-4 py-6', isDragActive ? 'border-crayon bg-sapwood' : 'border-ink-soft bg-sheet')}>
      <input {...input} accept={accepted} className="sr-only" aria-label="Choose pictures" tabIndex={-1} />
      <input
        ref={camera} className="sr-only" type="file" accept="image/*" capture="environment" aria-label="Take a photograph" tabIndex={-1}
        onChange={(event) => {
          take([...(event.target.files ?? [])]);
          event.target.value = '';
        }}
      />
      {room > 0
        ? (
          <div className="flex flex-wrap items-center gap-3">
            <button type="button" className={buttonKinds.primary} onClick={open}>Choose pictures</button>
            <button type="button" className={join(buttonKinds.outlined, 'hidden [@media(pointer:coarse)]:inline-flex')} onClick={() => camera.current?.click()}>Take a photograph</button>
            <span className="[@media(pointer:coarse)]:hidden">or drop them here</span>
          </div>
        )
        : <p className="font-semibold">{full.charAt(0).toUpperCase() + full.slice(1)}. Remove one to add another.</p>}
      <p className="mt-3 text-sm text-ink-soft">JPEG, PNG, WebP, AVIF or HEIC, up to {largestPhotoBytes / 1024 ** 2} MB each.{room > 0 && room < 10 ? ` Room for ${room} more.` : ''}</p>
    </div>
  );
}
