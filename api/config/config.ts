import { z } from 'zod';

const flag = z.enum(['0', '1']).default('0').transform((text) => text === '1');
const optionalUrl = z.url().optional().or(z.literal('').transform(() => undefined));

const environment = z.object({
  NODE_ENV: z.enum(['production', 'development', 'test']).default('production'),
  HOST: z.string().default('127.0.0.1'),
  PORT: z.coerce.number().int().min(0).max(65_535).default(4200),
  DATABASE_URL: z.url(),
  SEALER_DATABASE_URL: optionalUrl,
  REDIS_URL: optionalUrl,
  SMTP_URL: optionalUrl,
  /** Address that mails come from. */
  LEANYEAR_MAIL_FROM: z.string().default('Leanyear <desk@leanyear.example>'),
  LEANYEAR_QUEUE: z.enum(['redis', 'memory']).default('redis'),
  LEANYEAR_DATA_DIR: z.string().min(1),
  LEANYEAR_PUBLIC_URL: z.url().transform((url) => url.replace(/\/$/, '')),
  LEANYEAR_DEMO: flag,
  LEANYEAR_DEMO_ACCOUNTS: z.string().optional(),
  /** On: the person who uploaded a catalogue cannot be the only one to release it. */
  LEANYEAR_FOUR_EYES: flag,
  LEANYEAR_LARGEST_UPLOAD_MB: z.coerce.number().positive().default(100),
  LEANYEAR_WORKER_THREADS: z.coerce.number().int().min(1).max(64).optional(),
  /** Requests a minute from one address. */
  LEANYEAR_RATE_LIMIT: z.coerce.number().int().positive().default(1200),
  /** Proxies in front that may say whom they answer for; 0 where clients come directly. */
  LEANYEAR_TRUSTED_PROXIES: z.coerce.number().int().min(0).max(10).default(0),
  /** Attempts at signing in, and acts on signed links, a minute from one address. */
  LEANYEAR_SIGN_IN_LIMIT: z.coerce.number().int().positive().default(30),
  JWT_SECRET: z.string().min(32),
  LINK_SECRET: z.string().min(32),
  LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'silent']).default('info'),
});

export type Config = z.infer<typeof environment>;

/**
 * Reads the settings from the environment.
 * @throws Error naming every variable that is missing or wrong
 */
export function readConfig(variables: NodeJS.ProcessEnv): Config {
  const parsed = environment.safeParse(variables);
  if (parsed.success) return parsed.data;
  throw new Error(`Settings: ${parsed.error.issues.map((issue) => `${issue.path.join('.')}: ${issue.message}`).join('; ')}`);
}
