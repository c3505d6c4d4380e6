import { useState, type ReactElement } from 'react';
import type { PieceTyped } from '~/domain/listing/draft.ts';
import { pieceSize } from '~/domain/listing/piece-words.ts';
import { formatFeet, formatFraction, parseNumber } from '~/domain/measure.ts';
import { LOAD_CAUTION, type Project, type ProjectPiece, projectOf, projectPieces, projects } from '~/domain/sawing/projects.ts';
import { Button } from '../form/choices.tsx';
import { Field, Select } from '../form/fields.tsx';

const MOST_WASTE_PCT = 50;

/** A piece of a project as it would be typed in the cut list. */
const typedPiece = (piece: ProjectPiece): PieceTyped => ({
  label: piece.label,
  thickness: formatFraction(piece.thicknessIn),
  width: formatFraction(piece.widthIn),
  length: formatFeet(piece.lengthFt),
  count: String(piece.count),
  sizing: piece.sizing,
  kind: 'board',
  dwelling: '',
});

type Sizes = Readonly<Record<string, string>>;

/** The numbers of the project's fields, and what is wrong with each. */
function readSizes(project: Project, typed: Sizes): { readonly size: Record<string, number>; readonly problems: Readonly<Record<string, string>> } {
  const size: Record<string, number> = {};
  const problems: Record<string, string> = {};
  for (const { name, label, unit, least, most, usual } of project.fields) {
    const value = parseNumber(typed[name] ?? String(usual));
    if (value === null || value < least || value > most) problems[name] = `${label}: ${least} to ${most}${unit && ` ${unit}`}.`;
    else size[name] = value;
  }
  return { size, problems };
}

/** A small project becomes sizes of the cut list. */
export function ProjectHelper({ room, onAdd }: { readonly room: number; readonly onAdd: (pieces: readonly PieceTyped[]) => void }): ReactElement {
  const [kind, setKind] = useState('');
  const [typed, setTyped] = useState<Sizes>({});
  const [waste, setWaste] = useState('10');
  const [dressed, setDressed] = useState('full-sawn');
  const project = projectOf(kind);
  const { size, problems } = project ? readSizes(project, typed) : { size: {}, problems: {} };
  const wastePct = parseNumber(waste);
  const wasteProblem = wastePct === null || wastePct < 0 || wastePct > MOST_WASTE_PCT ? `More for waste: 0 to ${MOST_WASTE_PCT} %.` : undefined;
  const pieces = project && Object.keys(problems).length === 0 && !wasteProblem ? projectPieces(project, size, wastePct ?? 0, dressed === 'store-size') : [];
  return (
    <details className="border-b border-rule py-2">
      <summary className="min-h-target py-2.5 font-semibold text-crayon">Sizes for a small project</summary>
      <div className="grid gap-3 pb-3 pt-1">
        <div className="grid grid-cols-2 items-start gap-3 sm:grid-cols-4">
          <div className="col-span-2 sm:col-span-1">
            <Select name="project-kind" label="Project" value={kind} onChange={(event) => { setKind(event.target.value); setTyped({}); }} options={[{ value: '', label: 'Choose one' }, ...projects.map((each) => ({ value: each.kind, label: each.name }))]} />
          </div>
          {project?.fields.map((each) => (
            <Field key={`${kind} ${each.name}`} name={`project-${each.name}`} label={each.label} suffix={each.unit || undefined} figure inputMode="decimal" autoComplete="off" value={typed[each.name] ?? String(each.usual)} error={problems[each.name]} onChange={(event) => setTyped((before) => ({ ...before, [each.name]: event.target.value }))} />
          ))}
          {project && <Field name="project-waste" label="More for waste" suffix="%" figure inputMode="decimal" autoComplete="off" value={waste} error={wasteProblem} onChange={(event) => setWaste(event.target.value)} />}
          {project && <Select name="project-sizing" label="Sizing" value={dressed} onChange={(event) => setDressed(event.target.value)} options={[{ value: 'full-sawn', label: 'Full-sawn, rough' }, { value: 'store-size', label: 'Store size, planed' }]} />}
        </div>
        {pieces.length > 0 && <ul className="text-sm" aria-live="polite">{pieces.map((piece) => <li key={piece.label}>{piece.label}: <span className="figure">{piece.count} of {pieceSize(piece)}</span></li>)}</ul>}
        {project?.loadBearing && <p className="max-w-prose border-l-4 border-amber py-1 pl-3 text-sm"><span className="font-bold text-amber">Take care.</span> {LOAD_CAUTION}</p>}
        {project?.caution && <p className="max-w-prose border-l-4 border-amber py-1 pl-3 text-sm"><span className="font-bold text-amber">Take care.</span> {project.caution}</p>}
        {pieces.length > room && <p className="text-sm text-heartwood">The cut list has room for {room} more {room === 1 ? 'size' : 'sizes'}.</p>}
        {project && <div><Button kind="outlined" disabled={pieces.length === 0 || pieces.length > room} onClick={() => { onAdd(pieces.map(typedPiece)); setKind(''); }}>Add these sizes</Button></div>}
      </div>
    </details>
  );
}
