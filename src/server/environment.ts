import { z } from 'zod';
import { singleton } from './singleton';

const bool = z
  .enum(['0', '1', 'on', 'off', 'true', 'false'])
  .transform((v) => v === '1' || v === 'on' || v === 'true');

const Environment = z.object({
  NODE_ENV: z.enum(['production', 'development', 'test']).default('development'),
  /** Only loopback unless a proxy in front asks for more. */
  HOST: z.string().default('127.0.0.1'),
  PORT: z.coerce.number().int().min(0).max(65535).default(4321),
  /** What people type: scheme, host and port, without a trailing slash. */
  PUBLIC_URL: z.url().transform((v) => v.replace(/\/+$/, '')),
  DATABASE_URL: z.string().startsWith('postgres'),
  /** For LISTEN, which a pooler in transaction mode can't carry. Defaults to DATABASE_URL. */
  DATABASE_DIRECT_URL: z.string().startsWith('postgres').optional(),
  DATABASE_POOL: z.coerce.number().int().min(1).max(200).default(12),
  /** Off behind a pooler that knows no named prepared statements in transaction mode. */
  DATABASE_PREPARED_NAMES: bool.default(true),
  /** At least 32 random bytes; signs one-time links. */
  APP_SECRET: z.string().min(32),
  RESEND_API_KEY: z.string().min(1),
  RESEND_BASE_URL: z.url().optional(),
  MAIL_FROM: z.string().min(3),
  /** How many proxies in front append to X-Forwarded-For; 0 means none is believed. */
  TRUSTED_PROXY_HOPS: z.coerce.number().int().min(0).max(5).default(0),
  LOG_LEVEL: z.enum(['trace', 'debug', 'info', 'warn', 'error', 'fatal', 'silent']).default('info'),
  FAIRLEAD_DEMO: bool.default(false),
  /** Where the demo's captured mail is read; shown only in the demo. */
  MAIL_INBOX_URL: z.url().optional(),
});

export type Environment = z.infer<typeof Environment>;

/**
 * The process environment, parsed once at boot.
 *
 * @throws Error naming every variable that is missing or malformed, never its value.
 */
export function environment(): Environment {
  return singleton('environment', () => {
    const parsed = Environment.safeParse(process.env);
    if (!parsed.success) {
      const lines = parsed.error.issues.map((i) => `  ${i.path.join('.')}: ${i.message}`);
      throw new Error(`The environment is not complete:\n${lines.join('\n')}`);
    }
    return parsed.data;
  });
}

/** True where the service is reached over HTTPS, so cookies can be `__Host-` and HSTS is sent. */
export function isHttps(): boolean {
  return environment().PUBLIC_URL.startsWith('https:');
}
