// npx tsx db/make-moderator.ts ADDRESS ["NAME"]: makes a moderator, or raises an account to one, and sets its second factor up.
import { randomBytes } from 'node:crypto';
import { create } from 'qrcode';
import { useLocalRun } from '../src/launch/local-run.mjs';

const [email, name] = process.argv.slice(2);
if (!email || !/^\S+@\S+$/.test(email)) {
  console.error('Usage: npx tsx db/make-moderator.ts ADDRESS ["NAME"]\nThe name is needed when the address has no account yet.');
  process.exit(2);
}

/** A QR code (ISO/IEC 18004) in block letters, two rows of modules to a line, with quiet space round it. */
function qrText(text: string): string {
  const { modules } = create(text, { errorCorrectionLevel: 'L' });
  const dark = (x: number, y: number): boolean => x >= 0 && y >= 0 && x < modules.size && y < modules.size && Boolean(modules.get(y, x));
  const lines: string[] = [];
  for (let y = -2; y < modules.size + 2; y += 2) {
    let line = '';
    for (let x = -2; x < modules.size + 2; x += 1) line += dark(x, y) ? (dark(x, y + 1) ? ' ' : '▄') : dark(x, y + 1) ? '▀' : '█';
    lines.push(line);
  }
  return lines.join('\n');
}

try {
  useLocalRun();
  const { makeModerator } = await import('../src/server/commands/make-moderator.ts');
  const { secondFactorUri } = await import('../src/server/second-factor.ts');
  const password = randomBytes(12).toString('base64url');
  const made = await makeModerator({ email, name: name ?? null, password: name === undefined ? null : password }, new Date());
  const uri = secondFactorUri(email, made.secret);
  console.log(`${made.raised ? `${email} is a moderator now; its password stays.` : `${email} is a moderator. Password, said this once: ${password}`}

Second factor, said this once. Scan this with an authenticator app:

${qrText(uri)}

or type the secret: ${made.secret}
${uri}`);
  process.exit(0);
} catch (error) {
  console.error(error instanceof Error ? error.message : error);
  process.exit(1);
}
