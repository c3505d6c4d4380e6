import { z } from 'zod';

const origin = z.url().refine((text) => new URL(text).origin === text, 'must be an origin such as https://example.org, without a path');

const schema = z.object({
  NODE_ENV: z.enum(['production', 'development', 'test']).default('production'),
  PORT: z.coerce.number().int().min(1).max(65535).default(4321),
  HOST: z.string().default('127.0.0.1'),
  ORIGIN: origin,
  APP_SECRET: z.string().min(32, 'must be at least 32 characters'),
  DATABASE_URL: z.url({ protocol: /^postgres(ql)?$/ }),
  DATABASE_POOL: z.coerce.number().int().min(2).max(100).default(10),
  PAYMENTS_URL: origin.default('https://api.stripe.com'),
  PAYMENTS_PAGE_ORIGIN: origin.default('https://checkout.stripe.com'),
  PAYMENTS_SECRET_KEY: z.string().min(1),
  PAYMENTS_WEBHOOK_SECRET: z.string().min(1),
  STORAGE_ENDPOINT: origin,
  STORAGE_PUBLIC_ENDPOINT: origin,
  STORAGE_REGION: z.string().default('us-east-1'),
  STORAGE_BUCKET: z.string().min(3),
  STORAGE_ACCESS_KEY: z.string().min(1),
  STORAGE_SECRET_KEY: z.string().min(1),
  MAIL_URL: z.url({ protocol: /^smtps?$/ }),
  MAIL_FROM: z.string().min(3),
  FEE_BASIS_POINTS: z.coerce.number().int().min(0).max(5000).default(500),
  TRUSTED_PROXY: z.string().default(''),
  INNER_CALENDAR_HOSTS: z.string().default(''),
  LOG_LEVEL: z.enum(['debug', 'info', 'warn', 'error', 'silent']).default('info'),
});

export type Env = Readonly<z.infer<typeof schema>>;

/**
 * Reads and validates the environment, saying every fault at once.
 * @throws Error naming each variable that is missing or wrong.
 */
export function readEnv(source: Readonly<Record<string, string | undefined>>): Env {
  const result = schema.safeParse(source);
  if (result.success) return Object.freeze(result.data);
  const faults = result.error.issues.map((issue) => `  ${issue.path.join('.')}: ${issue.message}`);
  throw new Error(`The environment is not complete (see docker-free-dev.md):\n${faults.join('\n')}`);
}

let known: Env | undefined;

/** The environment of this process, read once. */
export const env = (): Env => (known ??= readEnv(process.env));
