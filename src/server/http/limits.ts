import pg from 'pg';
import { RateLimiterPostgres, RateLimiterRes } from 'rate-limiter-flexible';
import { tooMany } from '../errors.ts';
import { env } from '../env.ts';

/** How many tries, in how many seconds. Kept in PostgreSQL, so every process counts together. */
const limits = {
  'sign-in by address': { points: 30, duration: 900 },
  // Wrong passwords for one account from one address, and from everywhere: a stranger alone cannot keep somebody from signing in.
  'sign-in by account and address': { points: 10, duration: 900 },
  'sign-in by account': { points: 100, duration: 900 },
  'own password': { points: 10, duration: 900 },
  'second factor': { points: 8, duration: 900 },
  'sign-up': { points: 20, duration: 3600 },
  'password reset': { points: 6, duration: 3600 },
  'confirmation mail': { points: 6, duration: 3600 },
  'other calendar': { points: 20, duration: 3600 },
  upload: { points: 200, duration: 3600 },
  message: { points: 60, duration: 3600 },
  // Each sends the landowner a letter: so many on one listing, so many trips.
  'bid on a listing': { points: 30, duration: 3600 },
  'trip offered': { points: 20, duration: 3600 },
  // A map asks for about twenty tiles each time it is moved; those that are kept do not count.
  'map tiles': { points: 1500, duration: 300 },
  // Seconds of planning by the calculators that are for anyone.
  planning: { points: 240, duration: 600 },
  // A list of a thousand logs on paper holds the process for a part of a second.
  'list on paper': { points: 30, duration: 600 },
  report: { points: 20, duration: 3600 },
} as const;

export type LimitName = keyof typeof limits;

let pool: pg.Pool | undefined;
const limiters = new Map<LimitName, RateLimiterPostgres>();

function limiterFor(name: LimitName): RateLimiterPostgres {
  const known = limiters.get(name);
  if (known) return known;
  pool ??= new pg.Pool({ connectionString: env().DATABASE_URL, max: 2, application_name: 'skidway limits' });
  const made = new RateLimiterPostgres({ storeClient: pool, tableName: 'rate_limit', tableCreated: true, keyPrefix: name, ...limits[name] });
  limiters.set(name, made);
  return made;
}

const counted = (key: string): string => key.toLowerCase().slice(0, 200);

/**
 * Counts one try of the deed for this key (an address, an account).
 * @throws Refusal `tooMany` with the seconds to wait.
 */
export async function countTry(name: LimitName, key: string): Promise<void> {
  try {
    await limiterFor(name).consume(counted(key));
  } catch (error) {
    if (error instanceof RateLimiterRes) throw tooMany(Math.max(1, Math.ceil(error.msBeforeNext / 1000)));
    throw error;
  }
}

/** Counts more to a try that is over, when it is known what it cost. */
export async function countMore(name: LimitName, key: string, points: number): Promise<void> {
  if (points > 0) await limiterFor(name).penalty(counted(key), points);
}

/** Forgets the tries of a key, after a success. */
export async function forgetTries(name: LimitName, key: string): Promise<void> {
  await limiterFor(name).delete(counted(key));
}

/** Closes the limiter's own connections, for tests and a graceful stop. */
export async function closeLimits(): Promise<void> {
  await pool?.end();
  pool = undefined;
  limiters.clear();
}
