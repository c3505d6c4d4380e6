import { execute } from '~/server/db.ts';

const [, , email = ''] = process.argv;
const ended = await execute('DELETE FROM session WHERE account_id = (SELECT id FROM account WHERE email = $1)', [email]);
process.stdout.write(`${ended}\n`, () => process.exit(ended > 0 ? 0 : 1));
