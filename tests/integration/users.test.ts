import { randomUUID } from 'node:crypto';
import { afterAll, beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '../../src/lib/server/auth';
import { closeDatabase, database } from '../../src/lib/server/database';
import { AuditEntry, User } from '../../src/lib/server/models';
import { listAudit } from '../../src/lib/server/services/audit';
import { listOutbox, listReceived } from '../../src/lib/server/services/mail';
import {
	changeRole,
	createFirstAdmin,
	createUser,
	deactivateUser,
	listUsers,
	reactivateUser
} from '../../src/lib/server/services/users';
import { person } from '../support/people';

afterAll(closeDatabase);

const activeAdmins = () => User.count({ where: { role: 'admin', deactivatedAt: null } });
let admin: Actor;

beforeEach(async () => {
	database();
	// The only active admins are those that the test makes.
	await User.update({ deactivatedAt: new Date() }, { where: { role: 'admin' } });
	admin = await person('admin');
});

describe('the last active admin', () => {
	it('can neither be closed nor given another role', async () => {
		await expect(deactivateUser(admin, admin.id)).rejects.toMatchObject({ kind: 'conflict' });
		await expect(changeRole(admin, admin.id, 'instructor')).rejects.toMatchObject({
			kind: 'conflict'
		});
		expect(await activeAdmins()).toBe(1);
		const second = await person('admin');
		await deactivateUser(admin, admin.id);
		expect(await activeAdmins()).toBe(1);
		await expect(changeRole(second, second.id, 'student')).rejects.toMatchObject({
			kind: 'conflict'
		});
	});

	it('remains when admins take each other’s place at the same moment', async () => {
		for (let round = 0; round < 12; round++) {
			await User.update({ deactivatedAt: new Date() }, { where: { role: 'admin' } });
			const [a, b, c] = [await person('admin'), await person('admin'), await person('admin')];
			const outcomes = await Promise.allSettled([
				deactivateUser(a, b.id),
				changeRole(b, c.id, 'student'),
				deactivateUser(c, a.id),
				changeRole(a, a.id, 'instructor'),
				deactivateUser(b, b.id)
			]);
			for (const outcome of outcomes) {
				if (outcome.status === 'rejected') {
					expect(['conflict', 'forbidden']).toContain(outcome.reason.kind);
				}
			}
			expect(outcomes.some((outcome) => outcome.status === 'fulfilled')).toBe(true);
			expect(await activeAdmins()).toBeGreaterThanOrEqual(1);
		}
	});

	it('is not counted by an admin who has just lost the role', async () => {
		const second = await person('admin');
		await changeRole(admin, second.id, 'student');
		await expect(deactivateUser(second, admin.id)).rejects.toMatchObject({ kind: 'forbidden' });
	});
});

describe('looking after users', () => {
	it('is for admins alone', async () => {
		const email = `${randomUUID()}@studio.example`;
		for (const actor of [await person('student'), await person('instructor')]) {
			const refused = { kind: 'forbidden' };
			await expect(listUsers(actor)).rejects.toMatchObject(refused);
			await expect(createUser(actor, { email, name: 'X', role: 'admin' })).rejects.toMatchObject(
				refused
			);
			await expect(changeRole(actor, actor.id, 'admin')).rejects.toMatchObject(refused);
			await expect(deactivateUser(actor, admin.id)).rejects.toMatchObject(refused);
			await expect(listAudit(actor)).rejects.toMatchObject(refused);
			await expect(listOutbox(actor)).rejects.toMatchObject(refused);
			await expect(listReceived(actor)).rejects.toMatchObject(refused);
		}
		expect(await User.count({ where: { email } })).toBe(0);
	});

	it('refuses a second account with the same address, however it is written', async () => {
		const email = `${randomUUID()}@studio.example`;
		await createUser(admin, { email, name: 'One', role: 'student' });
		await expect(
			createUser(admin, { email: email.toUpperCase(), name: 'Two', role: 'student' })
		).rejects.toMatchObject({ kind: 'conflict', field: 'email' });
	});

	it('finds people by name and address, and takes signs for what they are', async () => {
		const name = `Ulrik 100%_${randomUUID().slice(0, 6)}`;
		const email = `${randomUUID()}@studio.example`;
		await createUser(admin, { email, name, role: 'student' });
		const found = async (search: string) =>
			(await listUsers(admin, { search })).users.map((user) => user.name);
		expect(await found(name.toLowerCase())).toEqual([name]);
		expect(await found(email.slice(0, 20))).toEqual([name]);
		expect(await found('100%_')).toContain(name);
		expect(await found(`100_%`)).toEqual([]);
		expect(await found("'; DROP TABLE class; --")).toEqual([]);
	});

	it('knows no user under what is no id', async () => {
		for (const id of ['', 'x', '-'.repeat(36), 'a'.repeat(36), "' OR true --"]) {
			await expect(deactivateUser(admin, id)).rejects.toMatchObject({ kind: 'not-found' });
			await expect(changeRole(admin, id, 'admin')).rejects.toMatchObject({ kind: 'not-found' });
		}
	});

	it('writes who did what', async () => {
		const user = await createUser(admin, {
			email: `${randomUUID()}@studio.example`,
			name: 'Nele',
			role: 'student'
		});
		await changeRole(admin, user.id, 'instructor');
		await deactivateUser(admin, user.id);
		await deactivateUser(admin, user.id);
		await reactivateUser(admin, user.id);
		const lines = await AuditEntry.findAll({
			where: { subjectId: user.id },
			order: [['createdAt', 'ASC']]
		});
		expect(lines.map((line) => line.action)).toEqual([
			'user.created',
			'user.role_changed',
			'user.deactivated',
			'user.reactivated'
		]);
		expect(lines.every((line) => line.actorId === admin.id)).toBe(true);
		const shown = (await listAudit(admin)).lines.find(
			(line) => line.action === 'user.role_changed'
		);
		expect(shown).toMatchObject({ actorName: admin.name, subjectName: 'Nele' });
		expect(shown?.detail).toEqual({ before: 'student', after: 'instructor' });
	});

	it('says so when there is no such user', async () => {
		for (const id of [randomUUID(), 'rubbish', '']) {
			await expect(deactivateUser(admin, id)).rejects.toMatchObject({ kind: 'not-found' });
		}
	});

	it('makes no first admin where there are users already', async () => {
		expect(await createFirstAdmin('late@studio.example', 'Late')).toBeNull();
	});
});
