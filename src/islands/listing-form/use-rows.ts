import { useRef, useState } from 'react';
import type { Problem } from '~/domain/result.ts';

/** A row as the form shows it: what it was opened with, and the problems it came back with. */
export interface Row<T> {
  readonly key: string;
  readonly opened: T;
  readonly problem: (field: string) => string | undefined;
}

export interface Rows<T> {
  readonly list: readonly Row<T>[];
  readonly add: () => void;
  /** Adds rows that are filled already, after the last. */
  readonly addAll: (filled: readonly T[]) => void;
  readonly remove: (index: number) => void;
}

/**
 * Rows that come and go. Fields keep what is typed by themselves; a row's key stays with it, so removing one never moves the text of
 * another, and a problem stays with the row it was said of.
 */
export function useRows<T>(name: string, opened: readonly T[], problems: readonly Problem[], blank: (last: T | undefined) => T, current: () => readonly T[]): Rows<T> {
  const counter = useRef(opened.length);
  const [list, setList] = useState<readonly Row<T>[]>(() =>
    opened.map((one, index) => ({
      key: `${name}-${index}`,
      opened: one,
      problem: (field) => problems.find(({ path }) => path === `${name}.${index}.${field}`)?.message,
    })),
  );
  return {
    list,
    add() {
      counter.current += 1;
      const key = `${name}-${counter.current}`;
      setList((rows) => [...rows, { key, opened: blank(current().at(-1)), problem: () => undefined }]);
      // The new row's first field, once it is there.
      requestAnimationFrame(() => document.querySelector<HTMLInputElement>(`[name="${name}.${list.length}.${name === 'logs' ? 'smallEnd' : 'label'}"]`)?.focus());
    },
    addAll(filled) {
      const rows = filled.map((one) => {
        counter.current += 1;
        return { key: `${name}-${counter.current}`, opened: one, problem: () => undefined };
      });
      setList((before) => [...before, ...rows]);
      // Nobody typed in them, yet they are to be kept like what is typed.
      requestAnimationFrame(() => document.querySelector(`[name^="${name}.${list.length}."]`)?.dispatchEvent(new Event('input', { bubbles: true })));
    },
    remove(index) {
      setList((rows) => rows.filter((_, other) => other !== index));
    },
  };
}
