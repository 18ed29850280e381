/** One logger: JSON lines, secrets struck out wherever they might be handed in. */
import { pino, type Logger } from 'pino';
import { config } from './config';

let logger: Logger | null = null;

const SECRET = ['password', 'currentPassword', 'newPassword', 'token', 'authorization', 'cookie', 'secret', 'hash'];

/** A statement that failed carries its values along: hashes of passwords, addresses, what people wrote. */
const VALUES = ['err', 'err.parent', 'err.original', 'err.cause', 'err.cause.parent', 'err.cause.original'].map(
  (error) => `${error}.parameters`
);

/** The process's logger, made on first use. */
export function log(): Logger {
  logger ??= pino({
    level: config().logLevel,
    base: undefined,
    timestamp: pino.stdTimeFunctions.isoTime,
    redact: { paths: [...SECRET.flatMap((key) => [key, `*.${key}`, `*.*.${key}`]), ...VALUES], censor: '[struck out]' }
  });
  return logger;
}
