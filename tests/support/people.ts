import { randomUUID } from 'node:crypto';
import type { Actor, Role } from '../../src/lib/server/auth';
import { database } from '../../src/lib/server/database';
import { Class, Membership, User } from '../../src/lib/server/models';

/** A new account, as the request's actor. */
export async function person(role: Role, name = `${role} ${randomUUID().slice(0, 4)}`) {
	database();
	const user = await User.create({ email: `${randomUUID()}@studio.example`, name, role });
	return { id: user.id, email: user.email, name, role, sessionVersion: 1 } satisfies Actor;
}

/** A class that the instructor teaches and the students are in since `joinedAt`. */
export async function classOf(
	instructor: Actor,
	students: readonly Actor[],
	joinedAt = new Date('2026-04-01T08:00:00Z')
): Promise<string> {
	const made = await Class.create({ name: `Class ${randomUUID().slice(0, 4)}` });
	await Membership.create({
		classId: made.id,
		userId: instructor.id,
		role: 'instructor',
		joinedAt
	});
	for (const student of students) {
		await Membership.create({ classId: made.id, userId: student.id, role: 'student', joinedAt });
	}
	return made.id;
}
