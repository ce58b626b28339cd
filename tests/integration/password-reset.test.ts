import { randomUUID } from 'node:crypto';
import { QueryTypes } from 'sequelize';
import { afterAll, describe, expect, it, vi } from 'vitest';
import { hashPassword } from '../../src/lib/server/auth/password';
import { countTry, LIMITS } from '../../src/lib/server/auth/rate-limit';
import { closeDatabase, database } from '../../src/lib/server/database';
import { PasswordReset, User } from '../../src/lib/server/models';
import {
	authenticate,
	readReset,
	requestReset,
	sendReset,
	setPasswordByLink
} from '../../src/lib/server/services/accounts';
import { createUser, sendWelcomeAgain } from '../../src/lib/server/services/users';
import { letterTo, lettersTo } from '../support/letters';
import { person } from '../support/people';

afterAll(closeDatabase);

const NEW = 'tern over grey water';
const address = () => `test-${randomUUID()}`;
const expired = { kind: 'expired' };

/** How many of our connections wait for a lock. */
async function waiting(): Promise<number> {
	const [row] = await database().query<{ n: number }>(
		"SELECT count(*)::int AS n FROM pg_stat_activity WHERE wait_event_type = 'Lock'",
		{ type: QueryTypes.SELECT }
	);
	return row.n;
}

async function asked() {
	const actor = await person('student');
	await sendReset(actor.email);
	const letter = await letterTo(actor.email);
	return { actor, token: letter?.token ?? '' };
}

describe('a link for a new password', () => {
	it('lets its owner in again after a stranger has used up every try', async () => {
		const { actor, token } = await asked();
		const { points } = LIMITS['sign-in-account'];
		for (let i = 0; i < points; i++) await countTry('sign-in-account', actor.email);
		await expect(authenticate(actor.email, NEW, address())).rejects.toMatchObject({
			kind: 'too-many'
		});
		await setPasswordByLink(token, NEW, address());
		expect(await authenticate(actor.email, NEW, address())).toMatchObject({ id: actor.id });
	});

	it('sets it once, ends every session and tells the owner', async () => {
		const { actor, token } = await asked();
		expect(await readReset(token, address())).toMatchObject({
			email: actor.email,
			purpose: 'reset'
		});
		expect(await setPasswordByLink(token, NEW, address())).toBe(actor.email);
		expect(await authenticate(actor.email, NEW, address())).toMatchObject({
			id: actor.id,
			sessionVersion: 2
		});
		expect((await letterTo(actor.email))?.kind).toBe('notice');
		await expect(setPasswordByLink(token, 'another good one', address())).rejects.toMatchObject(
			expired
		);
		await expect(readReset(token, address())).rejects.toMatchObject(expired);
		expect(await authenticate(actor.email, NEW, address())).not.toBeNull();
	});

	it('is used once even when it is sent several times at the same moment', async () => {
		const { actor, token } = await asked();
		const passwords = [NEW, 'another good one', 'and a third of them'];
		// The account is held until every request has come to a stop before it.
		const held = await database().transaction();
		await User.findByPk(actor.id, { lock: true, transaction: held });
		const all = passwords.map((password) => setPasswordByLink(token, password, address()));
		const settled = Promise.allSettled(all);
		await vi.waitFor(async () => expect(await waiting()).toBe(passwords.length), {
			timeout: 20_000
		});
		await held.commit();
		const outcomes = await settled;
		expect(outcomes.filter((o) => o.status === 'fulfilled').length).toBe(1);
		expect((await User.findByPk(actor.id))?.sessionVersion).toBe(2);
	});

	it('takes every other open link of the account with it', async () => {
		const { actor, token } = await asked();
		await sendReset(actor.email);
		const later = (await letterTo(actor.email))?.token ?? '';
		expect(later).not.toBe(token);
		await setPasswordByLink(token, NEW, address());
		await expect(readReset(later, address())).rejects.toMatchObject(expired);
	});

	it('does not work late, altered, or for a closed account', async () => {
		const late = await asked();
		await PasswordReset.update(
			{ createdAt: new Date(Date.now() - 7_200_000), expiresAt: new Date(Date.now() - 1) },
			{ where: { userId: late.actor.id } }
		);
		await expect(setPasswordByLink(late.token, NEW, address())).rejects.toMatchObject(expired);
		const altered = await asked();
		const last = altered.token.at(-2) === 'A' ? 'B' : 'A';
		const other = `${altered.token.slice(0, -2)}${last}${altered.token.at(-1)}`;
		await expect(setPasswordByLink(other, NEW, address())).rejects.toMatchObject(expired);
		const closed = await asked();
		await User.update({ deactivatedAt: new Date() }, { where: { id: closed.actor.id } });
		await expect(setPasswordByLink(closed.token, NEW, address())).rejects.toMatchObject(expired);
	});

	it('survives a refused password', async () => {
		const { token } = await asked();
		await expect(setPasswordByLink(token, 'password1234', address())).rejects.toMatchObject({
			kind: 'invalid',
			field: 'password'
		});
		await setPasswordByLink(token, NEW, address());
	});

	it('is not stored as it is', async () => {
		const { actor, token } = await asked();
		const row = await PasswordReset.findOne({ where: { userId: actor.id } });
		expect(JSON.stringify(row)).not.toContain(token);
	});
});

describe('asking for a link', () => {
	it('answers alike for accounts that exist and those that do not', async () => {
		const actor = await person('student');
		const stranger = `${randomUUID()}@studio.example`;
		const from = address();
		expect(await requestReset(actor.email, from)).toBe(await requestReset(stranger, from));
		await vi.waitFor(async () => expect(await lettersTo(actor.email)).toBe(1), { timeout: 10_000 });
		expect(await lettersTo(stranger)).toBe(0);
	});

	it('sends nothing to closed accounts', async () => {
		const actor = await person('student');
		await User.update({ deactivatedAt: new Date() }, { where: { id: actor.id } });
		await sendReset(actor.email);
		expect(await lettersTo(actor.email)).toBe(0);
	});

	it('is limited for each account and for each network address', async () => {
		const actor = await person('student');
		const account = LIMITS['reset-account'].points;
		for (let i = 0; i < account; i++) await sendReset(actor.email);
		await expect(sendReset(actor.email)).rejects.toMatchObject({ kind: 'too-many' });
		expect(await lettersTo(actor.email)).toBe(account);
		const from = address();
		for (let i = 0; i < LIMITS['reset-address'].points; i++) {
			await requestReset(`${randomUUID()}@studio.example`, from);
		}
		await expect(requestReset(actor.email, from)).rejects.toMatchObject({ kind: 'too-many' });
	});
});

describe('the first password', () => {
	it('is chosen by the link in the letter of welcome, and sent again on demand', async () => {
		const admin = await person('admin');
		const email = `${randomUUID()}@studio.example`;
		const made = await createUser(admin, { email, name: 'Wendel Ashmarsh', role: 'instructor' });
		const first = (await letterTo(email))?.token ?? '';
		expect(await readReset(first, address())).toMatchObject({ purpose: 'welcome' });
		await sendWelcomeAgain(admin, made.id);
		await expect(readReset(first, address())).rejects.toMatchObject(expired);
		await setPasswordByLink((await letterTo(email))?.token ?? '', NEW, address());
		expect(await authenticate(email, NEW, address())).toMatchObject({ role: 'instructor' });
		await expect(sendWelcomeAgain(admin, made.id)).rejects.toMatchObject({ kind: 'conflict' });
	});

	it('cannot be guessed before it is chosen', async () => {
		const hash = await hashPassword('nobody has this password');
		expect(hash).toHaveLength(60);
		const actor = await person('student');
		expect(await authenticate(actor.email, 'nobody has this password', address())).toBeNull();
	});
});
