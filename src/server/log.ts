import { pino, type Logger } from 'pino';
import { env } from './env.ts';

let known: Logger | undefined;

/** The structured log: one JSON line an entry. Passwords, tokens and cookies never reach it. */
export const log = (): Logger => (known ??= pino({ level: env().LOG_LEVEL, base: { pid: process.pid }, redact: ['password', 'token', 'cookie', 'authorization'] }));
