/** Whatever is sent to the JSON endpoints, the answer is a problem with a sentence, never a failure. */
import fc from 'fast-check';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/lib/server/auth';
import { closeDatabase } from '../../src/lib/server/database';
import * as attempts from '../../src/routes/api/attempts/+server';
import * as stringChecks from '../../src/routes/api/string-checks/+server';
import { person } from '../support/people';
import { playedAttempt } from '../support/played';
import { eventFor } from '../support/requests';

let student: Actor;
beforeAll(async () => {
	student = await person('student');
});
afterAll(closeDatabase);

const runs = { numRuns: 120, seed: 20260504 };
const endpoints = [
	['/api/attempts', attempts.POST],
	['/api/string-checks', stringChecks.POST]
] as const;

async function answered(path: string, post: unknown, sent: { json?: unknown; body?: string }) {
	const headers = { 'content-type': 'application/json' };
	const event = eventFor({ actor: student, path, headers, ...sent });
	return (post as (event: unknown) => Promise<Response>)(event);
}

async function expectProblem(response: Response) {
	expect(response.status).toBeGreaterThanOrEqual(400);
	expect(response.status).toBeLessThan(500);
	expect(response.headers.get('content-type')).toBe('application/problem+json');
	const problem = await response.json();
	expect(problem.status).toBe(response.status);
	expect(problem.title).toBeTruthy();
	expect(problem.detail).toMatch(/\.$/);
	expect(JSON.stringify(problem)).not.toMatch(/sequelize|postgres|\bat \/|select |insert /i);
}

describe.each(endpoints)('%s', (path, post) => {
	it('answers any JSON with a problem', async () => {
		await fc.assert(
			fc.asyncProperty(fc.json(), async (body) =>
				expectProblem(await answered(path, post, { body }))
			),
			runs
		);
	});

	it('answers any text with a problem', async () => {
		await fc.assert(
			fc.asyncProperty(fc.string({ unit: 'binary', minLength: 1 }), async (body) =>
				expectProblem(await answered(path, post, { body }))
			),
			runs
		);
	});
});

/** Every place in a JSON value, as paths. */
function placesIn(value: unknown, path: (string | number)[] = []): (string | number)[][] {
	if (value === null || typeof value !== 'object') return [path];
	return [
		path,
		...Object.entries(value).flatMap(([key, inner]) => placesIn(inner, [...path, key]))
	];
}

function replaced(value: unknown, path: readonly (string | number)[], by: unknown): unknown {
	if (path.length === 0) return by;
	const copy = structuredClone(value) as Record<string | number, unknown>;
	let at = copy;
	for (const key of path.slice(0, -1)) at = at[key] as Record<string | number, unknown>;
	at[path[path.length - 1]] = by;
	return copy;
}

const odd = fc.oneof(
	fc.constantFrom(null, '', 0, -1, 1e308, -1e-308, 4294967296, true, '\u0000', '\ud800', 'NaN'),
	fc.constantFrom([], {}, '9999-12-31T23:59:59Z', '0000-01-01T00:00:00Z', '__proto__'),
	fc.string({ unit: 'binary' }),
	fc.double(),
	fc.object({ maxDepth: 2 })
);

describe('a lawful record with one thing changed', () => {
	it('as an attempt: stored, repeated or a problem, never a failure', async () => {
		const lawful = playedAttempt({ seed: 91 });
		const places = placesIn(lawful);
		await fc.assert(
			fc.asyncProperty(fc.constantFrom(...places), odd, async (place, value) => {
				const json = replaced(lawful, place, value);
				const response = await answered('/api/attempts', attempts.POST, { json });
				if (response.status > 201) await expectProblem(response);
			}),
			{ ...runs, numRuns: 300 }
		);
	});

	it('as a string check: stored, repeated or a problem, never a failure', async () => {
		const lawful = {
			id: '6f1d9f0c-7a57-4b43-9a0e-5b5c3e0a7d11',
			kind: 'interval',
			notes: ['A3', 'E4'],
			source: 'file',
			result: {
				notes: [
					{
						note: 'A3',
						f1Hz: 220.1,
						f1Ci95Hz: [220, 220.2],
						inharmonicity: 3e-4,
						inharmonicityCi95: [2.9e-4, 3.1e-4],
						centsFromEqual: 0.8
					}
				],
				pairs: [
					{
						lowerPartial: 3,
						upperPartial: 2,
						frequencyHz: 660.2,
						verdict: 'beating',
						tier: 'firm',
						beatRateHz: 0.74,
						ci95Hz: [0.7, 0.78],
						windowSeconds: [0.1, 6],
						reason: null
					}
				],
				advice: ['Strike firmly.']
			},
			device: {
				sampleRateHz: 44_100,
				echoCancellation: null,
				noiseSuppression: null,
				autoGainControl: null,
				userAgentClass: 'desktop-chromium'
			},
			checkedAt: '2026-05-04T10:00:00.000Z'
		};
		const first = await answered('/api/string-checks', stringChecks.POST, { json: lawful });
		expect(first.status).toBe(201);
		await fc.assert(
			fc.asyncProperty(fc.constantFrom(...placesIn(lawful)), odd, async (place, value) => {
				const json = replaced(lawful, place, value);
				const response = await answered('/api/string-checks', stringChecks.POST, { json });
				if (response.status > 201) await expectProblem(response);
			}),
			{ ...runs, numRuns: 300 }
		);
	});
});

describe('the list of attempts', () => {
	it('answers any cursor with a page or a problem', async () => {
		await fc.assert(
			fc.asyncProperty(fc.string({ unit: 'binary' }), async (cursor) => {
				const path = `/api/attempts?cursor=${encodeURIComponent(cursor.toWellFormed())}`;
				const get = attempts.GET as unknown as (event: unknown) => Promise<Response>;
				const response = await get(eventFor({ actor: student, path }));
				if (response.status !== 200) await expectProblem(response);
			}),
			runs
		);
	});
});
