import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/lib/server/auth';
import { joinToken } from '../../src/lib/server/auth/tokens';
import { closeDatabase } from '../../src/lib/server/database';
import { Class, Invitation, Membership, User } from '../../src/lib/server/models';
import {
	archiveClass,
	createClass,
	joinLink,
	listClasses,
	removeStudent,
	revokeJoinLink
} from '../../src/lib/server/services/classes';
import {
	acceptAsMember,
	acceptAsNewcomer,
	inviteByEmail,
	listInvitations,
	readInvitation,
	revokeInvitation
} from '../../src/lib/server/services/invitations';
import {
	askByLink,
	joinByLink,
	readJoinLink,
	sendJoinInvitation
} from '../../src/lib/server/services/join-links';
import { letterTo, lettersTo } from '../support/letters';
import { person } from '../support/people';

const PASSWORD = 'tern over grey water';
const expired = { kind: 'expired' };
const newcomer = { name: 'Wendel Ashmarsh', password: PASSWORD };
const address = () => `test-${randomUUID()}`;
const email = () => `${randomUUID()}@studio.example`;

let teacher: Actor;
let classId: string;
beforeAll(async () => {
	teacher = await person('instructor');
});
beforeEach(async () => {
	({ id: classId } = await createClass(teacher, { name: 'Evening class' }));
});
afterAll(closeDatabase);

async function invited(to = email()) {
	await inviteByEmail(teacher, classId, to);
	return { to, token: (await letterTo(to))?.token ?? '' };
}

const members = (role: 'student' | 'instructor' = 'student') =>
	Membership.count({ where: { classId, role, leftAt: null } });

describe('an invitation', () => {
	it('makes an account and a place for a newcomer, once', async () => {
		const { to, token } = await invited();
		expect(await readInvitation(token, null, address())).toEqual({
			className: 'Evening class',
			inviterName: teacher.name,
			email: to,
			next: 'make-account'
		});
		expect(await acceptAsNewcomer(token, newcomer, address())).toBe(to);
		expect(await User.findOne({ where: { email: to } })).toMatchObject({
			name: 'Wendel Ashmarsh',
			role: 'student'
		});
		expect(await members()).toBe(1);
		await expect(acceptAsNewcomer(token, newcomer, address())).rejects.toMatchObject(expired);
		await expect(readInvitation(token, null, address())).rejects.toMatchObject(expired);
		expect(await members()).toBe(1);
	});

	it('makes one account when it is accepted twice at the same moment', async () => {
		const { to, token } = await invited();
		const outcomes = await Promise.allSettled(
			[1, 2, 3].map(() => acceptAsNewcomer(token, newcomer, address()))
		);
		expect(outcomes.filter((outcome) => outcome.status === 'fulfilled').length).toBe(1);
		for (const outcome of outcomes) {
			if (outcome.status === 'rejected') expect(outcome.reason).toMatchObject(expired);
		}
		expect(await User.count({ where: { email: to } })).toBe(1);
		expect(await members()).toBe(1);
	});

	it('gives a place to somebody who has an account, and to nobody else', async () => {
		const student = await person('student');
		const other = await person('student');
		const { token } = await invited(student.email.toUpperCase());
		const next = async (actor: Actor | null) =>
			(await readInvitation(token, actor, address())).next;
		expect(await next(null)).toBe('sign-in');
		expect(await next(student)).toBe('take-place');
		expect(await next(other)).toBe('wrong-account');
		await expect(acceptAsMember(token, other)).rejects.toMatchObject({ kind: 'forbidden' });
		await expect(acceptAsNewcomer(token, newcomer, address())).rejects.toMatchObject({
			kind: 'conflict'
		});
		await acceptAsMember(token, student);
		await expect(acceptAsMember(token, student)).rejects.toMatchObject(expired);
		expect(await members()).toBe(1);
	});

	it('stops working when it is withdrawn, late, sent anew, or its class is put away', async () => {
		const withdrawn = await invited();
		const [line] = await listInvitations(teacher, classId);
		await revokeInvitation(teacher, classId, line.id);
		await expect(revokeInvitation(teacher, classId, line.id)).rejects.toMatchObject({
			kind: 'not-found'
		});
		expect(await listInvitations(teacher, classId)).toEqual([]);

		const late = await invited();
		const before = new Date(Date.now() - 86_400_000);
		await Invitation.update(
			{ createdAt: before, expiresAt: new Date() },
			{ where: { email: late.to } }
		);

		const older = await invited();
		const newer = await invited(older.to);
		const dead = [withdrawn.token, late.token, older.token, 'rubbish', 'A'.repeat(43)];
		for (const token of dead) {
			await expect(readInvitation(token, null, address())).rejects.toMatchObject(expired);
			await expect(acceptAsNewcomer(token, newcomer, address())).rejects.toMatchObject(expired);
		}
		await archiveClass(teacher, classId, true);
		await expect(acceptAsNewcomer(newer.token, newcomer, address())).rejects.toMatchObject(expired);
		await archiveClass(teacher, classId, false);
		await acceptAsNewcomer(newer.token, newcomer, address());
		expect(await members()).toBe(1);
	});

	it('is not lost to a password that is refused', async () => {
		const { to, token } = await invited();
		const weak = { name: 'Wendel', password: 'password1234' };
		await expect(acceptAsNewcomer(token, weak, address())).rejects.toMatchObject({
			field: 'password'
		});
		expect(await User.count({ where: { email: to } })).toBe(0);
		await acceptAsNewcomer(token, newcomer, address());
	});

	it('is not sent to somebody who is in the class', async () => {
		const student = await person('student');
		await acceptAsMember((await invited(student.email)).token, student);
		await expect(inviteByEmail(teacher, classId, student.email)).rejects.toMatchObject({
			kind: 'conflict',
			field: 'email'
		});
		await removeStudent(teacher, classId, student.id);
		expect(await members()).toBe(0);
		await acceptAsMember((await invited(student.email)).token, student);
		expect(await members()).toBe(1);
	});

	it('does not make an admin a student, nor an instructor a student of their own class', async () => {
		const admin = await person('admin');
		await expect(acceptAsMember((await invited(admin.email)).token, admin)).rejects.toMatchObject({
			kind: 'forbidden'
		});
		await expect(inviteByEmail(teacher, classId, teacher.email)).rejects.toMatchObject({
			kind: 'conflict'
		});
	});
});

describe('another instructor', () => {
	it('meets the class as if it did not exist', async () => {
		const stranger = await person('instructor');
		const { to } = await invited();
		const [line] = await listInvitations(teacher, classId);
		const missing = { kind: 'not-found' };
		await expect(inviteByEmail(stranger, classId, email())).rejects.toMatchObject(missing);
		await expect(listInvitations(stranger, classId)).rejects.toMatchObject(missing);
		await expect(revokeInvitation(stranger, classId, line.id)).rejects.toMatchObject(missing);
		await expect(joinLink(stranger, classId)).rejects.toMatchObject(missing);
		await expect(revokeJoinLink(stranger, classId)).rejects.toMatchObject(missing);
		await expect(archiveClass(stranger, classId, true)).rejects.toMatchObject(missing);
		await expect(joinLink(teacher, randomUUID())).rejects.toMatchObject(missing);
		await expect(joinLink(teacher, 'rubbish')).rejects.toMatchObject(missing);
		expect((await listClasses(stranger)).map((line) => line.id)).not.toContain(classId);
		expect(await lettersTo(to)).toBe(1);
	});

	it('cannot withdraw an invitation by naming a class of their own', async () => {
		const stranger = await person('instructor');
		const own = await createClass(stranger, { name: 'Own' });
		await invited();
		const [line] = await listInvitations(teacher, classId);
		await expect(revokeInvitation(stranger, own.id, line.id)).rejects.toMatchObject({
			kind: 'not-found'
		});
	});
});

describe('opening a class', () => {
	it('is for instructors', async () => {
		for (const role of ['student', 'admin'] as const) {
			await expect(createClass(await person(role), { name: 'X' })).rejects.toMatchObject({
				kind: 'forbidden'
			});
		}
	});

	it('refuses an end before its start, at the field', async () => {
		const facts = { name: 'X', startsOn: '2026-05-02', endsOn: '2026-05-01' };
		await expect(createClass(teacher, facts)).rejects.toMatchObject({ field: 'endsOn' });
	});

	it('counts its students and open invitations', async () => {
		await acceptAsNewcomer((await invited()).token, newcomer, address());
		await invited();
		const line = (await listClasses(teacher)).find(({ id }) => id === classId);
		expect(line).toMatchObject({ students: 1, invited: 1, archived: false });
	});
});

describe('a join link', () => {
	const tokenOf = (link: string) => link.split('/join/')[1];

	it('lets the signed-in join, and joining twice changes nothing', async () => {
		const student = await person('student');
		const token = tokenOf(await joinLink(teacher, classId));
		expect(await readJoinLink(token, address())).toEqual({
			className: 'Evening class',
			instructors: [teacher.name]
		});
		await joinByLink(student, token);
		await joinByLink(student, token);
		expect(await members()).toBe(1);
		await expect(joinByLink(teacher, token)).rejects.toMatchObject({ kind: 'conflict' });
		expect(await members('instructor')).toBe(1);
	});

	it('is worth nothing once it is revoked, altered, of another class, or its class is put away', async () => {
		const student = await person('student');
		const old = tokenOf(await joinLink(teacher, classId));
		const present = tokenOf(await revokeJoinLink(teacher, classId));
		expect(present).not.toBe(old);
		const other = await createClass(teacher, { name: 'Other' });
		const [otherId] = tokenOf(await joinLink(teacher, other.id)).split('.');
		const forged = `${otherId}.${present.split('.')[1]}`;
		for (const token of [old, forged, `${present}x`, joinToken(randomUUID(), 1), 'rubbish']) {
			await expect(readJoinLink(token, address())).rejects.toMatchObject(expired);
			await expect(joinByLink(student, token)).rejects.toMatchObject(expired);
			await expect(askByLink(token, email(), address())).rejects.toMatchObject(expired);
		}
		await archiveClass(teacher, classId, true);
		await expect(joinByLink(student, present)).rejects.toMatchObject(expired);
		await archiveClass(teacher, classId, false);
		await joinByLink(student, present);
		expect(await members()).toBe(1);
	});

	it('sends strangers an invitation, whether or not they have an account', async () => {
		const found = await Class.findByPk(classId);
		const to = email();
		await sendJoinInvitation(classId, found?.name ?? '', to);
		const token = (await letterTo(to))?.token ?? '';
		expect(await readInvitation(token, null, address())).toMatchObject({
			inviterName: null,
			next: 'make-account'
		});
		await acceptAsNewcomer(token, newcomer, address());
		expect(await members()).toBe(1);
		const student = await person('student');
		const link = tokenOf(await joinLink(teacher, classId));
		expect(await askByLink(link, student.email, address())).toBe(
			await askByLink(link, email(), address())
		);
	});
});
