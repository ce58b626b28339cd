import pino, { type Logger } from 'pino';

let logger: Logger | undefined;

/**
 * The log of this process, on stdout as JSON lines. Log messages and ids, never whole errors of the
 * database: those carry values.
 */
export function log(): Logger {
	// Read without env(), so that a log line is possible even when settings are missing.
	logger ??= pino({ level: process.env.LOG_LEVEL ?? 'info', base: undefined });
	return logger;
}
