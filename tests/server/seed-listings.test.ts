import { spawnSync } from 'node:child_process';
import { randomBytes } from 'node:crypto';
import pg from 'pg';
import { afterAll, expect, it } from 'vitest';
import { coarsePoint } from '~/domain/geo.ts';
import { root } from '../../src/launch/setup.mjs';

const name = `skidway_seed_${randomBytes(4).toString('hex')}`;
const databaseUrl = (process.env['DATABASE_URL'] ?? '').replace(/\/[^/]*$/, `/${name}`);
const seed = (...args: readonly string[]) => spawnSync(process.execPath, ['--import', 'tsx', 'db/seed-listings.ts', ...args], { cwd: root, encoding: 'utf8' });

async function ask<Row extends pg.QueryResultRow>(url: string, sql: string): Promise<readonly Row[]> {
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  try {
    return (await client.query<Row>(sql)).rows;
  } finally {
    await client.end();
  }
}

afterAll(() => ask(databaseUrl.replace(/\/[^/]*$/, '/postgres'), `DROP DATABASE IF EXISTS ${name} WITH (FORCE)`));

it('listings for measuring are made, and made anew, each on the grid as the rules have it', async () => {
  for (const count of [20, 60]) {
    const made = seed(databaseUrl, String(count));
    expect([made.status, made.stderr]).toEqual([0, '']);
    const found = await ask<{ lat: number; lng: number; coarseLat: number; coarseLng: number }>(
      databaseUrl,
      'SELECT ST_Y(place::geometry) AS lat, ST_X(place::geometry) AS lng, ST_Y(coarse::geometry) AS "coarseLat", ST_X(coarse::geometry) AS "coarseLng" FROM listing',
    );
    expect(found.length).toBe(count);
    for (const { lat, lng, coarseLat, coarseLng } of found) expect({ lat: coarseLat, lng: coarseLng }).toEqual(coarsePoint({ lat, lng }));
  }
}, 60_000);

it('are never put where people’s may be', () => {
  for (const args of [[databaseUrl.replace(name, 'skidway'), '10'], [databaseUrl, '0'], [databaseUrl, 'many'], []]) expect(seed(...args).status).toBe(2);
});
