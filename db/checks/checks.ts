import { readdir, readFile } from 'node:fs/promises';
import { fileURLToPath } from 'node:url';
import { rows } from '../../src/server/db.ts';

const folder = fileURLToPath(new URL('.', import.meta.url));

/** One rule of integrity: a sentence in SQL that selects whatever breaks it. */
export interface Check {
  /** The file's name without its ending. */
  readonly name: string;
  /** The rule in words: the file's first comment. */
  readonly says: string;
  readonly sql: string;
}

/** A row that breaks a rule; `what` names the thing. */
export type Breach = Readonly<Record<string, unknown>> & { readonly what: unknown };

/** Every check of this folder, by name. */
export async function allChecks(): Promise<readonly Check[]> {
  const files = (await readdir(folder)).filter((file) => file.endsWith('.sql')).sort();
  return Promise.all(
    files.map(async (file) => {
      const sql = await readFile(`${folder}/${file}`, 'utf8');
      return { name: file.slice(0, -'.sql'.length), says: /^-- (.+)$/m.exec(sql)?.[1] ?? '', sql };
    }),
  );
}

/** What breaks the rule now; nothing when it holds. */
export const breachesOf = (check: Check): Promise<Breach[]> => rows<Breach>(check.sql);
