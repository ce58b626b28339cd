import { encode } from '@auth/core/jwt';
import bcrypt from 'bcryptjs';
import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { hashPassword } from '../../src/lib/server/auth/password';
import { LIMITS } from '../../src/lib/server/auth/rate-limit';
import { readSession, sessionCookie } from '../../src/lib/server/auth/session';
import { closeDatabase, database } from '../../src/lib/server/database';
import { env } from '../../src/lib/server/env';
import { AuditEntry, User } from '../../src/lib/server/models';
import {
	authenticate,
	changePassword,
	signOutEverywhere
} from '../../src/lib/server/services/accounts';
import { changeRole, deactivateUser, reactivateUser } from '../../src/lib/server/services/users';
import { person } from '../support/people';

const PASSWORD = 'lantern meadow quartz';
let hash: string;
beforeAll(async () => {
	database();
	hash = await hashPassword(PASSWORD);
});
afterAll(closeDatabase);

/** A network address that no other test uses. */
const address = () => `test-${randomUUID()}`;

async function account(facts: Partial<{ deactivatedAt: Date; passwordHash: string | null }> = {}) {
	const actor = await person('student');
	await User.update({ passwordHash: hash, ...facts }, { where: { id: actor.id } });
	return actor;
}

describe('who signs in', () => {
	it('is whoever has the address and the password, however the address is written', async () => {
		const actor = await account();
		const from = address();
		expect(await authenticate(actor.email, PASSWORD, from)).toEqual(actor);
		expect(await authenticate(` ${actor.email.toUpperCase()} `, PASSWORD, from)).toEqual(actor);
		expect(
			await AuditEntry.count({ where: { actorId: actor.id, action: 'session.started' } })
		).toBe(2);
	});

	it('is nobody with a wrong password, without an account, without a password, or deactivated', async () => {
		const from = address();
		const known = await account();
		const closed = await account({ deactivatedAt: new Date() });
		const fresh = await account({ passwordHash: null });
		expect(await authenticate(known.email, `${PASSWORD} `, from)).toBeNull();
		expect(await authenticate(known.email, '', from)).toBeNull();
		expect(await authenticate('nobody@studio.example', PASSWORD, from)).toBeNull();
		expect(await authenticate(closed.email, PASSWORD, from)).toBeNull();
		expect(await authenticate(fresh.email, 'nobody has this password', from)).toBeNull();
	});

	it('leaves the same trace whether or not the account exists', async () => {
		const known = await account();
		const refused = () => AuditEntry.count({ where: { action: 'session.refused' } });
		for (const email of [known.email, 'stranger@studio.example']) {
			const before = await refused();
			await authenticate(email, 'not the password', address());
			expect(await refused()).toBe(before + 1);
		}
	});

	it('costs the same work whether or not the account exists', async () => {
		const known = await account();
		const compare = vi.spyOn(bcrypt, 'compare');
		const costs: number[] = [];
		for (const email of [known.email, 'stranger@studio.example']) {
			compare.mockClear();
			await authenticate(email, 'not the password', address());
			expect(compare).toHaveBeenCalledTimes(1);
			costs.push(bcrypt.getRounds(compare.mock.calls[0][1]));
		}
		compare.mockRestore();
		expect(costs[0]).toBe(costs[1]);
	});
});

describe('the limit on tries', () => {
	const { points } = LIMITS['sign-in-pair'];

	it('refuses the right password too, for that address alone, known account or not', async () => {
		const known = await account();
		for (const email of [known.email, `${randomUUID()}@studio.example`]) {
			const from = address();
			for (let i = 0; i < points; i++) expect(await authenticate(email, 'wrong', from)).toBeNull();
			await expect(authenticate(email, PASSWORD, from)).rejects.toMatchObject({ kind: 'too-many' });
		}
		expect(await authenticate(known.email, PASSWORD, address())).toEqual(known);
	});

	it('is not passed by asking many times at once', async () => {
		const known = await account();
		const from = address();
		const tries = Array.from({ length: points * 2 }, () =>
			authenticate(known.email, 'wrong', from)
		);
		const outcomes = await Promise.allSettled(tries);
		expect(outcomes.filter((o) => o.status === 'fulfilled').length).toBe(points);
	});

	it('starts again after the right password', async () => {
		const known = await account();
		const from = address();
		for (let i = 0; i < points - 1; i++) await authenticate(known.email, 'wrong', from);
		expect(await authenticate(known.email, PASSWORD, from)).toEqual(known);
		for (let i = 0; i < points - 1; i++) {
			expect(await authenticate(known.email, 'wrong', from)).toBeNull();
		}
	});
});

/** Request headers as a browser with that session sends them. */
async function withSession(claims: Record<string, unknown>, secret = env().AUTH_SECRET) {
	const token = await encode({ token: claims, secret, salt: sessionCookie() });
	return new Headers({ cookie: `${sessionCookie()}=${token}` });
}

const actorOf = async (headers: Headers) => (await readSession(headers)).actor;

describe('a session', () => {
	it('gives the person as the database knows them now', async () => {
		const actor = await account();
		const headers = await withSession({ sub: actor.id, sessionVersion: 1 });
		expect(await actorOf(headers)).toEqual(actor);
		await User.update({ name: 'Renamed', role: 'instructor' }, { where: { id: actor.id } });
		expect(await actorOf(headers)).toMatchObject({ name: 'Renamed', role: 'instructor' });
	});

	it('is worth nothing when forged, empty, or for nobody', async () => {
		const actor = await account();
		const claims = { sub: actor.id, sessionVersion: 1 };
		expect(
			await actorOf(await withSession(claims, 'another secret, long enough to be taken'))
		).toBeNull();
		expect(await actorOf(new Headers({ cookie: `${sessionCookie()}=rubbish` }))).toBeNull();
		expect(await actorOf(new Headers())).toBeNull();
		expect(await actorOf(await withSession({ sub: randomUUID(), sessionVersion: 1 }))).toBeNull();
		expect(await actorOf(await withSession({ sub: actor.id }))).toBeNull();
	});

	it('ends at once by signing out everywhere', async () => {
		const actor = await account();
		const headers = await withSession({ sub: actor.id, sessionVersion: 1 });
		await signOutEverywhere(actor);
		expect(await actorOf(headers)).toBeNull();
	});

	it('ends at once with another password, which is the one that counts then', async () => {
		const actor = await account();
		const headers = await withSession({ sub: actor.id, sessionVersion: 1 });
		await changePassword(actor, PASSWORD, 'tern over grey water');
		expect(await actorOf(headers)).toBeNull();
		expect(await authenticate(actor.email, PASSWORD, address())).toBeNull();
		expect(await authenticate(actor.email, 'tern over grey water', address())).toMatchObject({
			id: actor.id,
			sessionVersion: 2
		});
	});

	it('ends at once when the account is closed, and stays ended when it is opened again', async () => {
		const admin = await person('admin');
		const actor = await account();
		const headers = await withSession({ sub: actor.id, sessionVersion: 1 });
		await deactivateUser(admin, actor.id);
		expect(await actorOf(headers)).toBeNull();
		await reactivateUser(admin, actor.id);
		expect(await actorOf(headers)).toBeNull();
	});

	it('has another role from the next request on', async () => {
		const admin = await person('admin');
		const actor = await account();
		const headers = await withSession({ sub: actor.id, sessionVersion: 1 });
		await changeRole(admin, actor.id, 'instructor');
		expect(await actorOf(headers)).toMatchObject({ role: 'instructor' });
	});
});

describe('changing the password', () => {
	it('needs the present one and another good one', async () => {
		const actor = await account();
		const field = async (current: string, next: string) =>
			changePassword(actor, current, next).then(
				() => 'changed',
				(refusal) => refusal.field
			);
		expect(await field('wrong', 'tern over grey water')).toBe('current');
		expect(await field(PASSWORD, 'short')).toBe('password');
		expect(await field(PASSWORD, 'password1234')).toBe('password');
		expect(await field(PASSWORD, PASSWORD)).toBe('password');
		expect(await authenticate(actor.email, PASSWORD, address())).toEqual(actor);
	});
});
