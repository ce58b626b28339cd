import { ConnectionAcquireTimeoutError, ConnectionRefusedError, DatabaseError } from 'sequelize';
import { describe, expect, it } from 'vitest';
import { isDatabaseAway } from './away';

const raw = (message: string, code?: string) =>
	Object.assign(new Error(message), { code, sql: '' });

describe('a database that does not answer', () => {
	it.each([
		['refused', new ConnectionRefusedError(raw('connect ECONNREFUSED'))],
		['no connection in time', new ConnectionAcquireTimeoutError(raw('timeout'))],
		['shutting down', new DatabaseError(raw('terminating connection', '57P01'))],
		['starting', raw('the database system is starting up', '57P03')],
		['broken off', new DatabaseError(raw('Connection terminated unexpectedly'))],
		[
			'wrapped by Auth.js',
			new Error('x', { cause: { err: new ConnectionRefusedError(raw('connect ECONNREFUSED')) } })
		]
	])('is told from other failures: %s', (_name, problem) => {
		expect(isDatabaseAway(problem)).toBe(true);
	});

	it.each([
		['a constraint', new DatabaseError(raw('duplicate key', '23505'))],
		['a visitor who hung up', raw('aborted', 'ECONNRESET')],
		['a fault of ours', new TypeError('x is not a function')],
		['nothing', undefined],
		['text', 'Connection terminated']
	])('is not %s', (_name, problem) => {
		expect(isDatabaseAway(problem)).toBe(false);
	});

	it('is looked for once where errors name each other', () => {
		const problem: Error & { parent?: unknown } = new Error('round');
		problem.parent = problem;
		expect(isDatabaseAway(problem)).toBe(false);
	});
});
