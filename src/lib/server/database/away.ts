import { ConnectionError } from 'sequelize';

/** What PostgreSQL says when it shuts down, starts, or has no connection left (SQLSTATE). */
const AWAY = new Set(['57P01', '57P02', '57P03', '53300']);
/** What its client says when a connection broke in the middle of a query. */
const BROKEN = /^(Connection terminated|Client has encountered a connection error)/;

/**
 * Whether something failed because the database does not answer, not because of what it was asked.
 * Looks through the errors that Sequelize, Auth.js and others wrap around the cause.
 */
export function isDatabaseAway(problem: unknown): boolean {
	const seen = new Set<unknown>();
	const waiting = [problem];
	while (waiting.length > 0) {
		const next = waiting.pop();
		if (typeof next !== 'object' || next === null || seen.has(next)) continue;
		seen.add(next);
		if (next instanceof ConnectionError) return true;
		const { code, message, cause, parent, err } = next as Record<string, unknown>;
		if (typeof code === 'string' && AWAY.has(code)) return true;
		if (next instanceof Error && BROKEN.test(String(message))) return true;
		waiting.push(cause, parent, err);
	}
	return false;
}
