import { useState, type KeyboardEvent, type ReactElement } from 'react';
import { field, join } from '~/components/classes.ts';
import { describedBy, fieldId } from '~/components/field-ids.ts';
import { findSpecies, matchSpecies, searchSpecies, type Species } from '~/domain/timber/species.ts';
import { Frame } from '~/islands/form/frame.tsx';

interface SpeciesPickerProps {
  readonly name: string;
  /** A species code, or empty. */
  readonly value: string;
  readonly onChoose: (code: string) => void;
  readonly error?: string | undefined;
}

const shown = 8;

/** Finds a species by common or scientific name as it is typed; arrows choose, Enter takes, leaving the field takes what is meant. */
export function SpeciesPicker({ name, value, onChoose, error }: SpeciesPickerProps): ReactElement {
  const [typed, setTyped] = useState<string | null>(null);
  const [at, setAt] = useState(0);
  const chosen = findSpecies(value);
  const open = typed !== null;
  const found = open ? searchSpecies(typed) : [];
  const listed = found.slice(0, shown);
  const listId = `${fieldId(name)}-list`;
  const optionId = (index: number): string => `${listId}-${index}`;

  const take = (species: Species | undefined): void => {
    if (species) onChoose(species.code);
    setTyped(null);
    setAt(0);
  };
  const leave = (): void => {
    if (typed === null) return;
    take(typed.trim() === '' ? undefined : (matchSpecies(typed) ?? (found.length === 1 ? found[0] : undefined)));
  };
  const press = (event: KeyboardEvent<HTMLInputElement>): void => {
    if (event.key === 'ArrowDown' || event.key === 'ArrowUp') {
      event.preventDefault();
      if (typed === null) setTyped('');
      else setAt((at + (event.key === 'ArrowDown' ? 1 : listed.length - 1)) % Math.max(1, listed.length));
    } else if (event.key === 'Enter' && open) {
      event.preventDefault();
      take(listed[at]);
    } else if (event.key === 'Escape') setTyped(null);
  };

  return (
    <Frame name={name} label="Species" error={error}>
      <div className="relative">
        <div className={join(field.box, error && field.boxWrong)}>
          <input
            className={field.input} id={fieldId(name)} name={name} type="text" autoComplete="off" autoCapitalize="off" spellCheck={false} placeholder="white oak, Quercus…"
            role="combobox" aria-expanded={open && listed.length > 0} aria-controls={listId} aria-autocomplete="list" aria-activedescendant={open && listed[at] ? optionId(at) : undefined}
            aria-describedby={describedBy(name, undefined, error)} aria-invalid={error ? true : undefined}
            value={typed ?? chosen?.name ?? ''}
            onChange={(event) => { setTyped(event.target.value); setAt(0); }}
            onFocus={(event) => event.target.select()}
            onBlur={leave} onKeyDown={press}
          />
        </div>
        <ul id={listId} role="listbox" aria-label="Species found" hidden={!open || listed.length === 0} className="absolute inset-x-0 z-20 border-2 border-t-0 border-ink bg-sheet">
          {listed.map((species, index) => (
            // Pressing would leave the field before the click arrives.
            <li key={species.code} id={optionId(index)} role="option" aria-selected={index === at} className={join('min-h-target cursor-pointer border-b border-rule px-2.5 py-1.5', index === at && 'bg-sapwood')} onMouseDown={(event) => event.preventDefault()} onClick={() => take(species)}>
              <span className="block font-semibold">{species.name}</span>
              <span className="block text-sm text-ink-soft"><i>{species.scientificName}</i>{species.aliases.length > 0 && ` · ${species.aliases.join(', ')}`}</span>
            </li>
          ))}
          {found.length > shown && <li role="presentation" className="px-2.5 py-1.5 text-sm text-ink-soft">and {found.length - shown} more: type on</li>}
        </ul>
        {open && typed.trim() !== '' && found.length === 0 && <p className={field.hint} role="status">No species of that name. Try its scientific name, or the nearest you know.</p>}
      </div>
    </Frame>
  );
}
