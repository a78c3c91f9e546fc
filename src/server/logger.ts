import { pino, type Logger } from 'pino';
import { singleton } from './singleton';

/**
 * JSON lines on standard output. Logs hold ids, codes and durations, never names, addresses,
 * tokens, cookies or bodies.
 */
export function logger(): Logger {
  return singleton('logger', () =>
    pino({
      level: process.env.LOG_LEVEL ?? 'info',
      base: { service: 'fairlead' },
      timestamp: pino.stdTimeFunctions.isoTime,
      redact: { paths: ['*.password', '*.token', '*.email', '*.cookie', '*.authorization'], censor: '—' },
    }),
  );
}

/** An error without its text where that could hold somebody's data: name, code, stack frames. */
export function errorForLog(error: unknown): Record<string, unknown> {
  if (!(error instanceof Error)) return { kind: typeof error };
  const code = (error as { code?: unknown }).code;
  const constraint = (error as { constraint?: unknown }).constraint;
  const cause = error.cause instanceof Error ? errorForLog(error.cause) : undefined;
  return {
    name: error.name,
    ...(typeof code === 'string' ? { code } : {}),
    ...(typeof constraint === 'string' ? { constraint } : {}),
    stack: error.stack?.split('\n').slice(1, 8).map((l) => l.trim()),
    ...(cause ? { cause } : {}),
  };
}
