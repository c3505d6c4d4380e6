// npx tsx db/checks/run.ts: reads the whole database and says which rules of integrity hold. Changes nothing; ends with 1 on a breach.
import { useLocalRun } from '../../src/launch/local-run.mjs';

const SHOWN = 10;

useLocalRun();
const { sequelize } = await import('../../src/server/db.ts');
const { allChecks, breachesOf } = await import('./checks.ts');

let broken = 0;
for (const check of await allChecks()) {
  const breaches = await breachesOf(check);
  console.log(`${breaches.length === 0 ? 'holds ' : 'BROKEN'}  ${check.says}`);
  for (const breach of breaches.slice(0, SHOWN)) console.log(`          ${JSON.stringify(breach)}`);
  if (breaches.length > SHOWN) console.log(`          … and ${breaches.length - SHOWN} more`);
  if (breaches.length > 0) broken += 1;
}
await sequelize.close();
process.exitCode = broken === 0 ? 0 : 1;
