import type { ReactElement } from 'react';
import { MOST_PIECES, isBlankPiece, type PieceTyped } from '~/domain/listing/draft.ts';
import { dwellingCautions } from '~/domain/listing/cautions.ts';
import { pieceSaid } from '~/domain/listing/piece-words.ts';
import { readPieceRow } from '~/domain/listing/rows.ts';
import { pieceKinds, sizings } from '~/domain/listing/answers.ts';
import { Button, Checkbox } from '../form/choices.tsx';
import { Field, Select } from '../form/fields.tsx';
import { Care, Part, useForm } from './parts.tsx';
import { ProjectHelper } from './ProjectHelper.tsx';
import type { Row, Rows } from './use-rows.ts';

/** The cut list: what the landowner hopes to build. */
export function PiecesPart({ rows }: { readonly rows: Rows<PieceTyped> }): ReactElement {
  const { typed } = useForm();
  return (
    <Part id="pieces" number={7} title="What you hope to build" lead="Sizes and how many of each, if you know them. Full-sawn is the size you write, rough from the saw. Store size is the name it has in a store: a 2 × 4 is 1 1/2 × 3 1/2 in once planed. A timber has the heart of the tree in its middle, or is cut clear of it (FOHC) so that it checks less; a live-edge slab keeps both edges, and its width is the least of its faces. Leave it empty and sawyers bid on the logs alone.">
      <div className="border-t border-rule">
        {rows.list.map((row, index) => <PieceRow key={row.key} row={row} index={index} typed={typed.pieces[index] ?? row.opened} onRemove={() => rows.remove(index)} />)}
      </div>
      {rows.list.length < MOST_PIECES && (
        <div><Button kind="outlined" type="submit" name="deed" value="add-piece" formNoValidate onClick={(event) => { event.preventDefault(); rows.add(); }}>{rows.list.length === 0 ? 'Add a size' : 'Add another size'}</Button></div>
      )}
      <ProjectHelper room={MOST_PIECES - rows.list.length} onAdd={rows.addAll} />
      <Care danger={dwellingCautions(typed.pieces.some((piece) => piece.dwelling !== ''))} />
    </Part>
  );
}

function PieceRow({ row, index, typed, onRemove }: { readonly row: Row<PieceTyped>; readonly index: number; readonly typed: PieceTyped; readonly onRemove: () => void }): ReactElement {
  const { opened } = row;
  const problem = (field: keyof PieceTyped): string | undefined => (typed[field] === opened[field] ? row.problem(field) : undefined);
  const name = (field: string): string => `pieces.${index}.${field}`;
  const read = isBlankPiece(typed) ? null : readPieceRow(typed);
  return (
    <fieldset className="min-w-0 border-b border-rule pb-4 pt-4">
      <legend className="sr-only">Size {index + 1}</legend>
      <div className="grid grid-cols-2 items-start gap-3 sm:grid-cols-[1.6fr_1fr_1fr_1fr_0.8fr_1.2fr_1.4fr]">
        <div className="col-span-2 sm:col-span-1"><Field name={name('label')} label="For" defaultValue={opened.label} autoComplete="off" placeholder="Table top" error={problem('label')} /></div>
        <Field name={name('thickness')} label="Thickness" defaultValue={opened.thickness} figure autoComplete="off" placeholder="8/4" error={problem('thickness')} />
        <Field name={name('width')} label="Width" defaultValue={opened.width} figure autoComplete="off" placeholder="6 in" error={problem('width')} />
        <Field name={name('length')} label="Length" defaultValue={opened.length} figure autoComplete="off" placeholder="8 ft" error={problem('length')} />
        <Field name={name('count')} label="How many" defaultValue={opened.count} figure inputMode="numeric" autoComplete="off" placeholder="6" error={problem('count')} />
        <Select name={name('sizing')} label="Sizing" defaultValue={opened.sizing || 'full-sawn'} options={sizings} error={problem('sizing')} />
        <Select name={name('kind')} label="Kind" defaultValue={opened.kind || 'board'} options={pieceKinds} error={problem('kind')} />
      </div>
      <div className="mt-1 flex flex-wrap items-center justify-between gap-x-6">
        <Checkbox name={name('dwelling')} label="For a house somebody lives in" defaultChecked={opened.dwelling !== ''} />
        <p className="text-sm text-ink-soft" aria-live="polite">{read?.ok ? pieceSaid(read.value) : ''}</p>
        <Button kind="quiet" type="submit" name="deed" value={`remove-piece:${index}`} formNoValidate onClick={(event) => { event.preventDefault(); onRemove(); }}>Remove size {index + 1}</Button>
      </div>
    </fieldset>
  );
}
