// npx tsx db/demo-code.ts: the code that the demo moderator's authenticator app would show now.
import { generateSync } from 'otplib';
import { DEMO_SECOND_FACTOR } from './story/demo-accounts.ts';

const left = 30 - (Math.floor(Date.now() / 1000) % 30);
console.log(`${generateSync({ secret: DEMO_SECOND_FACTOR })}   good for ${left} more seconds, once`);
