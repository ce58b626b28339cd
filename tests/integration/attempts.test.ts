import { randomUUID } from 'node:crypto';
import { QueryTypes } from 'sequelize';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { AttemptSubmission } from '../../src/lib/drills';
import type { Actor } from '../../src/lib/server/auth';
import { closeDatabase, database } from '../../src/lib/server/database';
import { listOwnAttempts, ownAttempt } from '../../src/lib/server/services/attempt-reading';
import { storeAttempt } from '../../src/lib/server/services/attempts';
import { POST } from '../../src/routes/api/attempts/+server';
import { person } from '../support/people';
import { playedAttempt } from '../support/played';
import { eventFor } from '../support/requests';

let student: Actor;
beforeAll(async () => {
	student = await person('student');
});
afterAll(closeDatabase);

const post = (actor: Actor, json: unknown) =>
	POST(eventFor({ actor, path: '/api/attempts', json })) as Promise<Response>;

const rowsOf = (id: string) =>
	database().query<{ n: number }>('SELECT count(*)::int AS n FROM attempt WHERE id = :id', {
		type: QueryTypes.SELECT,
		replacements: { id }
	});

type Day = { day: string; drill: string; attempts: number; seconds: number; median: number };
const rollup = (studentId: string) =>
	database().query<Day>(
		`SELECT to_char(day, 'YYYY-MM-DD') AS day, drill, attempts, seconds, median_error AS median
		FROM attempt_daily WHERE student_id = :studentId ORDER BY day, drill`,
		{ type: QueryTypes.SELECT, replacements: { studentId } }
	);
/** The same figures counted from the attempts themselves. */
const counted = (studentId: string) =>
	database().query<Day>(
		`SELECT to_char(day, 'YYYY-MM-DD') AS day, drill, count(*)::int AS attempts,
			sum(seconds)::int AS seconds,
			percentile_cont(0.5) WITHIN GROUP (ORDER BY error_median) AS median
		FROM attempt WHERE student_id = :studentId GROUP BY day, drill ORDER BY attempt.day, drill`,
		{ type: QueryTypes.SELECT, replacements: { studentId } }
	);

describe('storing an attempt', () => {
	it('keeps it once however often it is sent, and answers the same', async () => {
		const attempt = playedAttempt();
		const first = await post(student, attempt);
		expect(first.status).toBe(201);
		const answer = await first.json();
		expect(answer.score).toBeCloseTo(attempt.clientScore, 9);
		expect(answer.scoreFlagged).toBe(false);
		for (let again = 0; again < 3; again++) {
			const response = await post(student, attempt);
			expect(response.status).toBe(200);
			expect(await response.json()).toEqual(answer);
		}
		expect(await rowsOf(attempt.id)).toEqual([{ n: 1 }]);
	});

	it('takes the fields of a repeated attempt in any order', async () => {
		const attempt = playedAttempt({ seed: 12 });
		await storeAttempt(student, attempt);
		const turned = Object.fromEntries(Object.entries(attempt).reverse());
		expect((await post(student, turned)).status).toBe(200);
	});

	it('stores one of many that arrive at the same moment', async () => {
		const attempt = playedAttempt({ seed: 13 });
		const answers = await Promise.all(Array.from({ length: 12 }, () => post(student, attempt)));
		const statuses = answers.map((answer) => answer.status).sort();
		expect(statuses).toEqual([...Array(11).fill(200), 201]);
		expect(await rowsOf(attempt.id)).toEqual([{ n: 1 }]);
	});

	it('refuses another attempt under the same id', async () => {
		const attempt = playedAttempt({ seed: 14 });
		await storeAttempt(student, attempt);
		const other = await post(student, playedAttempt({ id: attempt.id, seed: 15 }));
		expect(other.status).toBe(409);
		expect(other.headers.get('content-type')).toBe('application/problem+json');
	});

	it("refuses another student's id and tells nothing of it", async () => {
		const attempt = playedAttempt({ seed: 16 });
		await storeAttempt(student, attempt);
		const stranger = await person('student');
		for (const sent of [attempt, playedAttempt({ id: attempt.id, seed: 17 })]) {
			const response = await post(stranger, sent);
			expect(response.status).toBe(404);
			const text = await response.text();
			expect(text).not.toContain(student.name);
			expect(text).not.toContain('score');
		}
		await expect(ownAttempt(stranger, attempt.id)).rejects.toMatchObject({ kind: 'not-found' });
	});
});

describe('an attempt that names whose work it is', () => {
	const sent = (actor: Actor, studentId: string, json: unknown) =>
		POST(
			eventFor({ actor, path: '/api/attempts', json, headers: { 'x-student-id': studentId } })
		) as Promise<Response>;

	it('is taken from that person and not stored for whoever signed in since', async () => {
		const attempt = playedAttempt({ seed: 18 });
		const other = await person('student');
		expect((await sent(other, student.id, attempt)).status).toBe(401);
		expect(await rowsOf(attempt.id)).toEqual([{ n: 0 }]);
		expect((await sent(student, student.id, attempt)).status).toBe(201);
	});
});

describe('the rollup by day', () => {
	it('is exact after concurrent, reordered and repeated sending', async () => {
		const busy = await person('student');
		const sent: AttemptSubmission[] = [];
		for (let i = 0; i < 24; i++) {
			sent.push(
				playedAttempt({
					seed: 100 + i,
					drill: i % 3 === 0 ? 'interval' : 'unison',
					leftCents: (index) => (index - 4) * (0.1 + i / 20),
					finishedAt: new Date(Date.UTC(2026, 4, 1 + (i % 3), 9, i))
				})
			);
		}
		// Backwards, everything twice, all at once.
		const order = [...sent].reverse().flatMap((attempt) => [attempt, attempt]);
		await Promise.all(order.map((attempt) => storeAttempt(busy, attempt)));
		const days = await rollup(busy.id);
		expect(days.reduce((sum, day) => sum + day.attempts, 0)).toBe(24);
		expect(days).toEqual(await counted(busy.id));
	});

	it('counts by the day on which the work was finished, not the day it arrived', async () => {
		const offline = await person('student');
		await storeAttempt(offline, playedAttempt({ finishedAt: new Date('2026-04-30T23:59:00Z') }));
		expect((await rollup(offline.id)).map(({ day }) => day)).toEqual(['2026-04-30']);
	});

	it('does not let a clock that runs ahead put work into the future', async () => {
		const ahead = await person('student');
		const now = new Date('2026-05-04T12:00:00Z');
		const attempt = playedAttempt({ finishedAt: new Date('2031-01-01T00:00:00Z') });
		const { id } = await storeAttempt(ahead, attempt, now);
		const view = await ownAttempt(ahead, id);
		expect(view.finishedAt).toBe(now.toISOString());
		expect(Date.parse(view.finishedAt) - Date.parse(view.startedAt)).toBe(90_000);
		expect((await storeAttempt(ahead, attempt)).created).toBe(false);
	});
});

describe('what is refused', () => {
	const tampered: [string, (attempt: AttemptSubmission) => unknown][] = [
		[
			'a stimulus that its seed does not draw',
			(a) => ({ ...a, seed: 99, stimulus: { ...a.stimulus, seed: 99 } })
		],
		[
			'an easier start than was drawn',
			(a) => {
				const copy = structuredClone(a) as unknown as {
					stimulus: { trials: { startCents: number }[] };
				};
				copy.stimulus.trials[0].startCents = 0;
				return copy;
			}
		],
		[
			'a commit where the string never stood',
			(a) => {
				const copy = structuredClone(a) as unknown as { trials: { committedCents: number }[] };
				copy.trials[3].committedCents = 0;
				return copy;
			}
		],
		['a trial too few', (a) => ({ ...a, trials: a.trials.slice(1) })],
		['a field too many', (a) => ({ ...a, studentId: randomUUID() })],
		[
			'an engine nobody knows',
			(a) => ({ ...a, engineVersion: 999, stimulus: { ...a.stimulus, engineVersion: 999 } })
		],
		['an end before the beginning', (a) => ({ ...a, finishedAt: '2026-05-04T09:00:00.000Z' })],
		[
			'a time before there were clocks',
			(a) => ({ ...a, startedAt: '0001-01-01T00:00:00Z', finishedAt: '0001-01-02T00:00:00Z' })
		],
		['nothing', () => null]
	];
	it.each(tampered)('%s: 422 with a sentence, nothing stored', async (_what, tamper) => {
		const attempt = playedAttempt({ seed: 31 });
		const response = await post(student, tamper(attempt));
		expect(response.status).toBe(422);
		expect(response.headers.get('content-type')).toBe('application/problem+json');
		const problem = await response.json();
		expect(problem).toMatchObject({ status: 422, title: 'The attempt was not stored' });
		expect(problem.detail).toMatch(/\.$/);
		expect(await rowsOf(attempt.id)).toEqual([{ n: 0 }]);
	});

	it('a body that is too large, not JSON, or a form', async () => {
		const send = (body: string, type: string) =>
			POST(
				eventFor({ actor: student, path: '/api/attempts', body, headers: { 'content-type': type } })
			) as Promise<Response>;
		expect((await send(' '.repeat(1_300_000), 'application/json')).status).toBe(413);
		expect((await send('{"id":', 'application/json')).status).toBe(400);
		expect((await send('id=1', 'application/x-www-form-urlencoded')).status).toBe(415);
		expect((await send('{"id":"\\u0000"}', 'application/json')).status).toBe(400);
	});
});

describe("a score that differs from the server's", () => {
	const audited = (id: string) =>
		database().query<{ actor: string; detail: { clientScore: number; serverScore: number } }>(
			`SELECT actor_id AS actor, detail FROM audit_entry
			WHERE action = 'attempt.score_differs' AND subject_id = :id`,
			{ type: QueryTypes.SELECT, replacements: { id } }
		);

	it('is stored with both scores, flagged, and audited once', async () => {
		const honest = playedAttempt({ seed: 41 });
		const attempt = { ...honest, clientScore: honest.clientScore / 2 + 2e-6 };
		const response = await post(student, attempt);
		expect(response.status).toBe(201);
		const answer = await response.json();
		expect(answer.scoreFlagged).toBe(true);
		expect(answer.score).toBeCloseTo(honest.clientScore, 9);
		await post(student, attempt);
		const lines = await audited(attempt.id);
		expect(lines).toHaveLength(1);
		expect(lines[0].actor).toBe(student.id);
		expect(lines[0].detail.clientScore).toBe(attempt.clientScore);
		expect(lines[0].detail.serverScore).toBeCloseTo(honest.clientScore, 9);
	});

	it('is let pass within a millionth', async () => {
		const honest = playedAttempt({ seed: 42 });
		const attempt = { ...honest, clientScore: honest.clientScore + 5e-7 };
		expect((await storeAttempt(student, attempt)).scoreFlagged).toBe(false);
		expect(await audited(attempt.id)).toHaveLength(0);
	});
});

describe('a stored attempt', () => {
	it('is never changed, not even by hand', async () => {
		const { id } = await storeAttempt(student, playedAttempt({ seed: 51 }));
		await expect(
			database().query('UPDATE attempt SET server_score = 0 WHERE id = :id', {
				replacements: { id }
			})
		).rejects.toThrow('never changed');
	});

	it('is listed newest first, page by page, without gap or repeat', async () => {
		const reader = await person('student');
		const ids: string[] = [];
		for (let i = 0; i < 55; i++) {
			// Five share one moment, so that the id decides.
			const finishedAt = new Date(Date.UTC(2026, 2, 1, 8, Math.floor(i / 5)));
			ids.push((await storeAttempt(reader, playedAttempt({ seed: i, finishedAt }))).id);
		}
		const first = await listOwnAttempts(reader, null);
		expect(first.attempts).toHaveLength(50);
		const second = await listOwnAttempts(reader, first.nextCursor);
		expect(second.nextCursor).toBeNull();
		const all = [...first.attempts, ...second.attempts];
		expect(new Set(all.map(({ id }) => id))).toEqual(new Set(ids));
		const times = all.map(({ finishedAt }) => finishedAt);
		expect(times).toEqual([...times].sort().reverse());
	});

	it.each([
		'',
		'x',
		'MjAyNi0xMy0wMQ',
		Buffer.from(`9999-99-99T00:00:00.000Z ${randomUUID()}`).toString('base64url')
	])('refuses the cursor %j', async (cursor) => {
		await expect(listOwnAttempts(student, cursor)).rejects.toMatchObject({ kind: 'invalid' });
	});
});
