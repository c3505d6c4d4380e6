import { rows } from '../db.ts';
import { env } from '../env.ts';
import { mailAnswers } from '../services/mail.ts';
import { storageAnswers } from '../services/storage.ts';

export interface Health {
  readonly ok: boolean;
  readonly database: boolean;
  readonly storage: boolean;
  readonly payments: boolean;
  readonly mail: boolean;
}

async function within(ms: number, work: Promise<boolean>): Promise<boolean> {
  let timer: NodeJS.Timeout | undefined;
  const late = new Promise<boolean>((resolve) => (timer = setTimeout(() => resolve(false), ms)));
  const answer = await Promise.race([work.catch(() => false), late]);
  clearTimeout(timer);
  return answer;
}

/** An outside service lives when it answers at all, whatever it thinks of a request without credentials. */
const answersHttp = async (url: string): Promise<boolean> => (await fetch(url, { method: 'GET', redirect: 'manual', signal: AbortSignal.timeout(2000) })).status < 500;

/** Asks every part whether it answers, each for at most two seconds. */
export async function health(): Promise<Health> {
  const [database, storage, payments, mail] = await Promise.all([
    within(2000, rows('SELECT 1 AS one').then((found) => found.length === 1)),
    within(2000, storageAnswers()),
    within(2000, answersHttp(`${env().PAYMENTS_URL}/v1/balance`)),
    within(2000, mailAnswers()),
  ]);
  return { ok: database && storage && payments && mail, database, storage, payments, mail };
}
