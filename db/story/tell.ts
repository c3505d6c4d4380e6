// Tells the demo's story once. Run by `npm start` and before the journeys of the checks; a second run finds it told and loads nothing.
import pg from 'pg';

const TOLD = "SELECT EXISTS (SELECT 1 FROM event WHERE thing = 'story' AND action = 'tellStory') AS told, EXISTS (SELECT 1 FROM account) AS inhabited";

async function state(): Promise<{ told: boolean; inhabited: boolean }> {
  const client = new pg.Client({ connectionString: process.env['DATABASE_URL'] ?? '' });
  await client.connect();
  const { rows } = await client.query<{ told: boolean; inhabited: boolean }>(TOLD);
  await client.end();
  return rows[0] ?? { told: false, inhabited: true };
}

const { told, inhabited } = await state();
// Somebody's own database, or one whose telling was cut off.
if (!told && inhabited) console.log('The demo story is told into an empty database only; this one is left as it is. (Remove .data to begin anew.)');
if (!told && !inhabited) {
  const { tellStory } = await import('./story.ts');
  const { sequelize } = await import('../../src/server/db.ts');
  const { closeLimits } = await import('../../src/server/http/limits.ts');
  const now = new Date();
  await tellStory(now);
  console.log(`The demo story is told (${((Date.now() - now.getTime()) / 1000).toFixed(1)} s).`);
  await closeLimits();
  await sequelize.close();
  // The planner's thread would keep the process.
  process.exit(0);
}
