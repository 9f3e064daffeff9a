import pino from 'pino';
import { env } from './env.ts';

/** JSON lines for machines to read. Never a password, a token, a presigned address or a person's data. */
export const log = pino({
  level: env.LOG_LEVEL,
  base: null,
  timestamp: pino.stdTimeFunctions.isoTime,
  redact: {
    paths: ['*.password', '*.token', '*.cookie', '*.authorization', '*.email'],
    censor: '[kept out]',
  },
});
