/** One logger: JSON lines, secrets struck out wherever they might be handed in. */
import { pino, type Logger } from 'pino';
import { config } from './config';

let logger: Logger | null = null;

const SECRET = ['password', 'currentPassword', 'newPassword', 'token', 'authorization', 'cookie', 'secret', 'hash'];

/** The process's logger, made on first use. */
export function log(): Logger {
  logger ??= pino({
    level: config().logLevel,
    base: undefined,
    timestamp: pino.stdTimeFunctions.isoTime,
    redact: { paths: SECRET.flatMap((key) => [key, `*.${key}`, `*.*.${key}`]), censor: '[struck out]' }
  });
  return logger;
}
