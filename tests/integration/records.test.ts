import { randomUUID } from 'node:crypto';
import { QueryTypes } from 'sequelize';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/lib/server/auth';
import { closeDatabase, database } from '../../src/lib/server/database';
import { Membership } from '../../src/lib/server/models';
import { studentAttempt } from '../../src/lib/server/services/attempt-reading';
import { storeAttempt } from '../../src/lib/server/services/attempts';
import { classOverview } from '../../src/lib/server/services/class-overview';
import { ownProgress, studentProgress } from '../../src/lib/server/services/progress';
import { markRemarkSeen, ownRemarks, writeRemark } from '../../src/lib/server/services/remarks';
import { storeStringCheck } from '../../src/lib/server/services/string-checks';
import { todayOf } from '../../src/lib/server/services/today';
import { classOf, person } from '../support/people';
import { playedAttempt } from '../support/played';

afterAll(closeDatabase);

const at = (day: string, hour = 9) =>
	new Date(`${day}T${String(hour).padStart(2, '0')}:00:00.000Z`);
const NOW = at('2026-05-20', 12);
const refused = (kind: string) => expect.objectContaining({ kind });

function check(over: Record<string, unknown> = {}) {
	return {
		id: randomUUID(),
		kind: 'unison',
		notes: ['Bb3'],
		source: 'microphone',
		result: { notes: [], pairs: [], advice: ['Strike again, a little firmer.'] },
		device: {
			sampleRateHz: 48_000,
			echoCancellation: false,
			noiseSuppression: false,
			autoGainControl: false,
			userAgentClass: 'desktop-chromium'
		},
		checkedAt: at('2026-05-06').toISOString(),
		...over
	};
}

describe('string checks', () => {
	let student: Actor;
	beforeAll(async () => {
		student = await person('student');
	});

	it('are stored once, with notes in one spelling', async () => {
		const sent = check();
		expect(await storeStringCheck(student, sent, NOW)).toEqual({ id: sent.id, created: true });
		expect(await storeStringCheck(student, sent, NOW)).toEqual({ id: sent.id, created: false });
		const { stringChecks } = await ownProgress(student);
		expect(stringChecks.filter(({ id }) => id === sent.id)).toMatchObject([{ notes: ['A#3'] }]);
	});

	it('refuse another check under the id, and the id of another student', async () => {
		const sent = check();
		await storeStringCheck(student, sent, NOW);
		await expect(storeStringCheck(student, { ...sent, kind: 'note' }, NOW)).rejects.toEqual(
			refused('conflict')
		);
		await expect(storeStringCheck(await person('student'), sent, NOW)).rejects.toEqual(
			refused('not-found')
		);
	});

	it.each<[string, Record<string, unknown>]>([
		['sound beside the numbers', { audio: [0, 0.1, 0.2] }],
		['sound in the result', { result: { ...check().result, samples: 'UklGRg==' } }],
		['sound in the device', { device: { ...check().device, clip: 'data:audio/wav;base64,AA==' } }],
		[
			'more sentences than there are',
			{ result: { ...check().result, advice: Array(21).fill('a') } }
		],
		['a sentence as long as a clip', { result: { ...check().result, advice: ['a'.repeat(501)] } }],
		['a note no piano has a name for', { notes: ['H4'] }],
		['three notes', { notes: ['A3', 'A4', 'A5'] }]
	])('have no place for %s', async (_what, over) => {
		await expect(storeStringCheck(student, check(over), NOW)).rejects.toEqual(refused('invalid'));
	});
});

describe('what an instructor sees', () => {
	let teacher: Actor;
	let other: Actor;
	let student: Actor;
	let classId: string;
	let early: string;
	let late: string;
	beforeAll(async () => {
		teacher = await person('instructor');
		other = await person('instructor');
		student = await person('student', 'Ada Tidewell');
		classId = await classOf(teacher, [student], at('2026-05-05', 15));
		await classOf(other, [await person('student')]);
		const store = (day: string, seed: number, leftCents: number) =>
			storeAttempt(
				student,
				playedAttempt({ seed, finishedAt: at(day), leftCents: () => leftCents }),
				NOW
			).then(({ id }) => id);
		early = await store('2026-05-04', 61, 3);
		late = await store('2026-05-06', 62, 0.5);
		await storeStringCheck(student, check({ checkedAt: at('2026-05-02').toISOString() }), NOW);
		await storeStringCheck(student, check({ checkedAt: at('2026-05-08').toISOString() }), NOW);
	});

	it('is the class since each student joined, counted and judged', async () => {
		const { students } = await classOverview(teacher, classId, NOW);
		expect(students).toHaveLength(1);
		const [row] = students;
		// Ten trials of six seconds.
		expect(row).toMatchObject({ name: 'Ada Tidewell', attempts: 1, seconds: 60, daysAway: 14 });
		expect(row.drills.unison).toMatchObject({ verdict: 'inside', trend: 'too-few' });
		expect(row.drills.unison?.errorCents).toBeCloseTo(0.5, 1);
		expect(row.drills.interval).toBeNull();
		expect(row.lastStringCheck).toEqual({ kind: 'unison', notes: ['A#3'], day: '2026-05-08' });
	});

	it('is the student since joining, no day before', async () => {
		const seen = await studentProgress(teacher, classId, student.id);
		expect(seen.since).toBe('2026-05-05');
		expect(seen.drills[0].points.map(({ attemptId }) => attemptId)).toEqual([late]);
		expect(seen.drills[0].days.map(({ day }) => day)).toEqual(['2026-05-06']);
		expect(seen.stringChecks).toHaveLength(1);
		expect((await ownProgress(student)).drills[0].points).toHaveLength(2);
		await expect(studentAttempt(teacher, classId, student.id, early)).rejects.toEqual(
			refused('not-found')
		);
		expect((await studentAttempt(teacher, classId, student.id, late)).student.name).toBe(
			'Ada Tidewell'
		);
	});

	it("is nothing of another's class, nor of a student through another class", async () => {
		const ownClass = await classOf(other, []);
		for (const [who, where] of [
			[other, classId],
			[other, ownClass],
			[student, classId],
			[await person('admin'), classId]
		] as const) {
			await expect(studentProgress(who, where, student.id)).rejects.toEqual(refused('not-found'));
			await expect(studentAttempt(who, where, student.id, late)).rejects.toEqual(
				refused('not-found')
			);
		}
		await expect(classOverview(other, classId, NOW)).rejects.toEqual(refused('not-found'));
		await expect(classOverview(teacher, 'not-an-id', NOW)).rejects.toEqual(refused('not-found'));
	});

	it('ends when the student or the instructor leaves', async () => {
		const leaving = await person('student');
		const id = await classOf(teacher, [leaving], at('2026-05-05'));
		await storeAttempt(leaving, playedAttempt({ seed: 63, finishedAt: at('2026-05-07') }), NOW);
		expect((await studentProgress(teacher, id, leaving.id)).drills[0].points).toHaveLength(1);
		await Membership.update({ leftAt: NOW }, { where: { classId: id, userId: leaving.id } });
		await expect(studentProgress(teacher, id, leaving.id)).rejects.toEqual(refused('not-found'));
		expect((await classOverview(teacher, id, NOW)).students).toEqual([]);
		await Membership.update({ leftAt: NOW }, { where: { classId: id, userId: teacher.id } });
		await expect(classOverview(teacher, id, NOW)).rejects.toEqual(refused('not-found'));
	});

	it('is read by index, not by going through the table', async () => {
		const plan = async (sql: string) => {
			const rows = await database().transaction(async (transaction) => {
				// A small table is read whole whatever the indexes; the question is whether one serves.
				await database().query('SET LOCAL enable_seqscan = off', { transaction });
				return database().query<{ 'QUERY PLAN': string }>(`EXPLAIN ${sql}`, {
					type: QueryTypes.SELECT,
					replacements: { id: student.id },
					transaction
				});
			});
			return rows.map((row) => row['QUERY PLAN']).join('\n');
		};
		expect(
			await plan(`SELECT id, error_median FROM attempt WHERE student_id = :id AND drill = 'unison'
				AND day >= '2026-05-05' ORDER BY finished_at DESC, id DESC LIMIT 200`)
		).toMatch(/attempt_student_drill_(finished|day)/);
		expect(
			await plan(`SELECT median_error FROM attempt_daily WHERE student_id = :id
				AND drill = 'unison' AND day >= '2026-05-05' ORDER BY day DESC LIMIT 200`)
		).toMatch(/attempt_daily_pkey/);
	});
});

describe('remarks', () => {
	let teacher: Actor;
	let student: Actor;
	let classId: string;
	beforeAll(async () => {
		teacher = await person('instructor', 'Imre Wharfling');
		student = await person('student');
		classId = await classOf(teacher, [student], at('2026-05-05'));
	});

	it('go from the instructor to Today, until the student puts them away', async () => {
		const { id: attemptId } = await storeAttempt(
			student,
			playedAttempt({ seed: 71, finishedAt: at('2026-05-06') }),
			NOW
		);
		const text = 'Listen longer: it is :slow, not "still".';
		await writeRemark(teacher, { classId, studentId: student.id, attemptId }, `  ${text}\n`);
		const { remarks } = await todayOf(student, NOW);
		expect(remarks).toMatchObject([
			{ text, author: 'Imre Wharfling', seenAt: null, attempt: { id: attemptId, drill: 'unison' } }
		]);
		await expect(markRemarkSeen(await person('student'), remarks[0].id)).rejects.toEqual(
			refused('not-found')
		);
		await markRemarkSeen(student, remarks[0].id);
		const [first] = await ownRemarks(student);
		await markRemarkSeen(student, remarks[0].id);
		expect((await todayOf(student, NOW)).remarks).toEqual([]);
		expect((await ownRemarks(student))[0].seenAt).toBe(first.seenAt);
	});

	it('are refused to strangers, about strangers, and without words', async () => {
		const to = { classId, studentId: student.id, attemptId: null };
		const stranger = await person('instructor');
		const outside = await person('student');
		const { id: foreign } = await storeAttempt(outside, playedAttempt({ seed: 72 }), NOW);
		const write = (who: Actor, over: Partial<Parameters<typeof writeRemark>[1]>, text = 'Yes.') =>
			writeRemark(who, { ...to, ...over }, text);
		await expect(write(stranger, {})).rejects.toEqual(refused('not-found'));
		await expect(write(student, {})).rejects.toEqual(refused('not-found'));
		await expect(write(teacher, { studentId: outside.id })).rejects.toEqual(refused('not-found'));
		await expect(write(teacher, { studentId: teacher.id })).rejects.toEqual(refused('not-found'));
		await expect(write(teacher, { attemptId: foreign })).rejects.toEqual(refused('not-found'));
		await expect(write(teacher, { attemptId: 'x' })).rejects.toEqual(refused('not-found'));
		await expect(write(teacher, {}, ' \n\0 ')).rejects.toEqual(refused('invalid'));
		await expect(write(teacher, {}, 'a'.repeat(2001))).rejects.toEqual(refused('invalid'));
		expect(await ownRemarks(outside)).toEqual([]);
	});
});

describe('Today', () => {
	it('begins a new student at the fork with unisons', async () => {
		const today = await todayOf(await person('student'), NOW);
		expect(today).toMatchObject({
			isNew: true,
			order: { stepId: 'fork', partId: 'do' },
			next: { kind: 'drill', drill: 'unison', href: '/practice/unison' },
			remarks: []
		});
		expect(today.next.reason).toMatch(/\.$/);
	});

	it('goes on to the temperament when unisons were held on two days', async () => {
		const student = await person('student');
		for (const [seed, day] of [
			[81, '2026-05-18'],
			[82, '2026-05-19']
		] as const) {
			const attempt = playedAttempt({ seed, finishedAt: at(day), leftCents: () => 0.2 });
			await storeAttempt(student, attempt, NOW);
		}
		const today = await todayOf(student, NOW);
		expect(today.order.stepId).toBe('temperament');
		expect(today.next).toMatchObject({ drill: 'interval' });
	});
});
