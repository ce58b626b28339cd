import { QueryTypes } from 'sequelize';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { measuredChecks } from '../../src/cli/demo/string-checks';
import { passwordFault } from '../../src/lib/server/auth/password-rules';
import { isPassword } from '../../src/lib/server/auth/password';
import { closeDatabase, database } from '../../src/lib/server/database';
import { DEMO_SIGN_INS, seedDemo } from '../../src/lib/server/database/seeders';
import { User } from '../../src/lib/server/models';
import { classOverview } from '../../src/lib/server/services/class-overview';
import { listClasses } from '../../src/lib/server/services/classes';
import { todayOf } from '../../src/lib/server/services/today';

const TODAY = new Date('2026-06-17T15:00:00Z');
let asked = 0;
/** Two of the planned checks: measuring them all takes its time. */
const measure: Parameters<typeof seedDemo>[0]['measure'] = (plans) => {
	asked += 1;
	return measuredChecks(plans.slice(0, 2));
};

const one = async <T extends object>(sql: string): Promise<T> =>
	(await database().query<T>(sql, { type: QueryTypes.SELECT }))[0];

async function actorOf(email: string) {
	const user = await User.findOne({ where: { email } });
	if (!user) throw new Error(`nobody has ${email}`);
	const { id, name, role, sessionVersion } = user;
	return { id, email, name, role, sessionVersion };
}

beforeAll(async () => {
	expect(await seedDemo({ today: TODAY, measure })).toBe('seeded');
}, 300_000);
afterAll(closeDatabase);

const DEMO = `student_id IN (SELECT id FROM "user" WHERE email LIKE '%@tidewater-studio.example')`;

describe('the demonstration', () => {
	it('has one admin, two instructors and six students who can sign in', async () => {
		const roles = DEMO_SIGN_INS.map(({ role }) => role);
		expect(roles.filter((role) => role === 'student')).toHaveLength(6);
		expect(roles.filter((role) => role === 'instructor')).toHaveLength(2);
		expect(roles.filter((role) => role === 'admin')).toHaveLength(1);
		for (const { email, name, password, role } of DEMO_SIGN_INS) {
			expect(passwordFault(password, { email, name })).toBeNull();
			const user = await User.findOne({ where: { email } });
			expect(user).toMatchObject({ name, role });
		}
		const [{ email, password }] = DEMO_SIGN_INS;
		const user = await User.findOne({ where: { email } });
		expect(await isPassword(password, user?.passwordHash ?? null)).toBe(true);
	});

	it('has eight weeks of attempts, scored like any other, none after today', async () => {
		const facts = await one<Record<string, number | Date>>(
			`SELECT count(*)::int AS attempts, count(DISTINCT student_id)::int AS students,
				count(DISTINCT drill)::int AS drills, count(*) FILTER (WHERE score_flagged)::int AS flagged,
				min(started_at) AS first, max(finished_at) AS last,
				count(*) FILTER (WHERE received_at < finished_at)::int AS early
			FROM attempt WHERE ${DEMO}`
		);
		expect(facts).toMatchObject({ students: 6, drills: 2, flagged: 0, early: 0 });
		expect(facts.attempts).toBeGreaterThan(200);
		expect((facts.last as Date).getTime()).toBeLessThanOrEqual(TODAY.getTime());
		const weeks = (TODAY.getTime() - (facts.first as Date).getTime()) / (7 * 86_400_000);
		expect(weeks).toBeGreaterThan(7);
		expect(weeks).toBeLessThanOrEqual(8.2);
	});

	it('has a rollup that equals its attempts', async () => {
		const { wrong } = await one<{ wrong: number }>(
			`SELECT count(*)::int AS wrong FROM (
				SELECT student_id, drill, day, count(*)::int AS attempts, sum(seconds)::int AS seconds,
					percentile_cont(0.5) WITHIN GROUP (ORDER BY error_median) AS median_error
				FROM attempt WHERE ${DEMO} GROUP BY student_id, drill, day
			) a
			FULL JOIN (SELECT * FROM attempt_daily WHERE ${DEMO}) d USING (student_id, drill, day)
			WHERE (a.attempts, a.seconds, a.median_error)
				IS DISTINCT FROM (d.attempts, d.seconds, d.median_error)`
		);
		expect(wrong).toBe(0);
	});

	it('shows the instructor students who stand at different places', async () => {
		const teacher = await actorOf(DEMO_SIGN_INS[0].email);
		const [line] = await listClasses(teacher);
		const { students } = await classOverview(teacher, line.id, TODAY);
		expect(students).toHaveLength(6);
		const verdicts = new Set(students.map((student) => student.drills.interval?.verdict));
		expect(verdicts.size).toBeGreaterThan(1);
		expect(students.some(({ daysAway }) => (daysAway ?? 0) >= 6)).toBe(true);
		expect(students.filter(({ lastStringCheck }) => lastStringCheck)).toHaveLength(1);
		const places = new Set<string>();
		for (const { email } of DEMO_SIGN_INS.filter(({ role }) => role === 'student')) {
			const { order } = await todayOf(await actorOf(email), TODAY);
			places.add(`${order.stepId}.${order.partId}`);
		}
		expect(places.size).toBeGreaterThan(2);
	});

	it('leaves a remark to be read on Today, about one of the own blocks', async () => {
		const jory = await actorOf(DEMO_SIGN_INS[1].email);
		const { remarks, order } = await todayOf(jory, TODAY);
		expect(order.stepId).toBe('temperament');
		expect(remarks).toHaveLength(1);
		expect(remarks[0].attempt?.drill).toBe('interval');
	});

	it('changes nothing when it is run again, on another day or after breaking off', async () => {
		const count = () =>
			one<Record<string, number>>(
				`SELECT (SELECT count(*) FROM attempt)::int AS attempts,
					(SELECT count(*) FROM "user")::int AS users, (SELECT count(*) FROM remark)::int AS remarks,
					(SELECT count(*) FROM string_check)::int AS checks,
					(SELECT count(*) FROM membership)::int AS members`
			);
		const before = await count();
		const tomorrow = new Date(TODAY.getTime() + 86_400_000);
		expect(await seedDemo({ today: tomorrow, measure })).toBe('present');
		expect(asked).toBe(1);
		// As if the first run had been broken off before it was done.
		await database().query(`DELETE FROM audit_entry WHERE action = 'demo.seeded'`);
		expect(await seedDemo({ today: TODAY, measure })).toBe('seeded');
		expect(await count()).toEqual(before);
	}, 300_000);
});
