import { QueryTypes } from 'sequelize';
import { createRandom } from '../../../acoustics/random';
import { simulateLearner, uuidFrom } from '../../../drills/simulation/learner';
import type { MeasureResult } from '../../../measurement/types';
import type { Actor } from '../../auth';
import { hashPassword } from '../../auth/password';
import { AuditEntry, Class, Membership, Remark, User } from '../../models';
import { storeAttempt } from '../../services/attempts';
import { audit } from '../../services/audit';
import { storeStringCheck } from '../../services/string-checks';
import { database } from '../connection';
import {
	ADMIN,
	CHECK_PLANS,
	COLLEAGUE,
	REMARKS,
	STUDENTS,
	TEACHER,
	type DemoCheckPlan,
	type DemoPerson,
	type DemoStudent
} from './demo-people';

const DAY_MS = 86_400_000;
const WEEKS = 8;
const CLASS_ID = '7d1c4a52-0b6e-4c0e-9a51-0e3f6f2a8c01';
const COMING_CLASS_ID = '7d1c4a52-0b6e-4c0e-9a51-0e3f6f2a8c02';

/** A planned check as it was measured. */
export interface DemoCheck {
	plan: DemoCheckPlan;
	result: MeasureResult;
	sampleRateHz: number;
}

export interface DemoOptions {
	/** Any moment of the day on which the demonstration ends; nothing is dated after it. */
	today: Date;
	/** Sounds and measures the planned checks; asked only when they are needed. */
	measure: (plans: readonly DemoCheckPlan[]) => DemoCheck[];
}

/**
 * Puts the demonstration into the database: one studio, a class of six students with eight weeks of
 * history played by simulated learners and scored as any attempt is, their string checks, and
 * remarks. Run again it changes nothing; broken off, it goes on where it was.
 * @returns 'present' when it was complete already.
 */
export async function seedDemo({ today, measure }: DemoOptions): Promise<'seeded' | 'present'> {
	database();
	if (await AuditEntry.count({ where: { action: 'demo.seeded' } })) return 'present';
	const people = await seedPeople();
	const endMs = await seedClasses(people, today);
	for (const student of STUDENTS) await seedAttempts(student, people, endMs);
	await seedChecks(measure(CHECK_PLANS), people, endMs);
	await seedRemarks(people, endMs);
	const subject = { type: 'class' as const, id: CLASS_ID };
	await audit({ actorId: null, action: 'demo.seeded', subject });
	return 'seeded';
}

type People = ReadonlyMap<string, Actor>;

function of(people: People, key: string): Actor {
	const actor = people.get(key);
	if (!actor) throw new Error(`The demonstration has nobody called ${key}.`);
	return actor;
}

async function seedPeople(): Promise<People> {
	const people = new Map<string, Actor>();
	for (const person of [ADMIN, TEACHER, COLLEAGUE, ...STUDENTS]) {
		people.set(person.key, await seedPerson(person));
	}
	return people;
}

async function seedPerson({ email, name, role, password }: DemoPerson): Promise<Actor> {
	const known = await User.findOne({ where: { email } });
	const user =
		known ?? (await User.create({ email, name, role, passwordHash: await hashPassword(password) }));
	return { id: user.id, email, name, role, sessionVersion: user.sessionVersion };
}

/**
 * @returns the end of the last day of the history, milliseconds since 1970. A class that is there
 * already keeps its days, so that a second run plays the same history.
 */
async function seedClasses(people: People, today: Date): Promise<number> {
	const todayMs = Math.floor(today.getTime() / DAY_MS) * DAY_MS;
	const dayOf = (ms: number) => new Date(ms).toISOString().slice(0, 10);
	const [taught] = await Class.findOrCreate({
		where: { id: CLASS_ID },
		defaults: {
			id: CLASS_ID,
			name: 'Evening class, first term',
			startsOn: dayOf(todayMs - WEEKS * 7 * DAY_MS),
			endsOn: dayOf(todayMs + 13 * DAY_MS)
		}
	});
	const startMs = Date.parse(taught.startsOn ?? '');
	await Class.findOrCreate({
		where: { id: COMING_CLASS_ID },
		defaults: {
			id: COMING_CLASS_ID,
			name: 'Long weekend, two hands a piano',
			startsOn: dayOf(startMs + (WEEKS + 3) * 7 * DAY_MS),
			endsOn: dayOf(startMs + (WEEKS + 3) * 7 * DAY_MS + 3 * DAY_MS)
		}
	});
	const joinedAt = new Date(startMs);
	await seat(CLASS_ID, of(people, TEACHER.key), 'instructor', joinedAt);
	await seat(COMING_CLASS_ID, of(people, COLLEAGUE.key), 'instructor', joinedAt);
	for (const { key } of STUDENTS) await seat(CLASS_ID, of(people, key), 'student', joinedAt);
	// The history ends with the day of the first run, or now if that is sooner.
	return Math.min(startMs + (WEEKS * 7 + 1) * DAY_MS - 1, today.getTime());
}

async function seat(
	classId: string,
	actor: Actor,
	role: 'student' | 'instructor',
	joinedAt: Date
): Promise<void> {
	await Membership.findOrCreate({
		where: { classId, userId: actor.id },
		defaults: { classId, userId: actor.id, role, joinedAt }
	});
}

async function seedAttempts(student: DemoStudent, people: People, endMs: number): Promise<void> {
	const actor = of(people, student.key);
	const endDayMs = Math.floor(endMs / DAY_MS) * DAY_MS;
	const attempts = simulateLearner({
		seed: student.seed,
		startMs: endDayMs - WEEKS * 7 * DAY_MS,
		weeks: WEEKS + 1,
		profile: student.profile,
		untilMs: endMs - student.awayDays * DAY_MS
	});
	// Two learners may share a seed, their attempts must not share ids.
	const random = createRandom(5000 + STUDENTS.indexOf(student));
	for (const attempt of attempts) {
		const own = { ...attempt, id: uuidFrom(random) };
		await storeAttempt(actor, own, new Date(attempt.finishedAt));
	}
}

async function seedChecks(
	checks: readonly DemoCheck[],
	people: People,
	endMs: number
): Promise<void> {
	const random = createRandom(71);
	for (const { plan, result, sampleRateHz } of checks) {
		const checkedAt = momentOf(endMs, plan.daysAgo, plan.hour);
		const record = {
			id: uuidFrom(random),
			kind: plan.kind,
			notes: [...plan.notes],
			source: 'microphone',
			result,
			device: {
				sampleRateHz,
				echoCancellation: false,
				noiseSuppression: false,
				autoGainControl: false,
				userAgentClass: 'touch-webkit'
			},
			checkedAt: checkedAt.toISOString()
		};
		await storeStringCheck(of(people, plan.student), record, checkedAt);
	}
}

async function seedRemarks(people: People, endMs: number): Promise<void> {
	const authorId = of(people, TEACHER.key).id;
	const random = createRandom(73);
	for (const { student, daysAgo, about, seen, text } of REMARKS) {
		const id = uuidFrom(random);
		const studentId = of(people, student).id;
		const createdAt = momentOf(endMs, daysAgo, 19);
		const attemptId = about ? await latestBlock(studentId, about, createdAt) : null;
		const seenAt = seen ? new Date(createdAt.getTime() + 14 * 3_600_000) : null;
		await Remark.findOrCreate({
			where: { id },
			defaults: { id, studentId, authorId, attemptId, text, createdAt, seenAt }
		});
	}
}

async function latestBlock(studentId: string, drill: string, before: Date): Promise<string | null> {
	const [row] = await database().query<{ id: string }>(
		`SELECT id FROM attempt
		WHERE student_id = :studentId AND drill = :drill AND finished_at < :before
		ORDER BY finished_at DESC LIMIT 1`,
		{ type: QueryTypes.SELECT, replacements: { studentId, drill, before } }
	);
	return row?.id ?? null;
}

function momentOf(endMs: number, daysAgo: number, hour: number): Date {
	const day = Math.floor(endMs / DAY_MS) - daysAgo;
	return new Date(day * DAY_MS + hour * 3_600_000);
}
