import { Op } from 'sequelize';
import type { Actor } from '../auth';
import { hashPassword, isPassword } from '../auth/password';
import { passwordFault } from '../auth/password-rules';
import { countTry, forgetTries, takeBackTry } from '../auth/rate-limit';
import { hashOfToken, newToken } from '../auth/tokens';
import { database } from '../database';
import { env } from '../env';
import { log } from '../log';
import { passwordChangedLetter, resetLetter } from '../mail/templates';
import { PasswordReset, User } from '../models';
import { Refusal } from '../refusal';
import { audit } from './audit';
import { queueLetter } from './mail';
import { isUuid } from './visibility';

const RESET_MINUTES = 60;

/** The public face of a user row. */
export function actorOf(user: User): Actor {
	const { id, email, name, role, sessionVersion } = user;
	return { id, email, name, role, sessionVersion };
}

/**
 * Who has this address and this password. Unknown addresses, wrong passwords, accounts without a
 * password and deactivated accounts all answer null, after the same work.
 * @param address network address the request came from.
 * @throws Refusal `too-many`.
 */
export async function authenticate(
	email: string,
	password: string,
	address: string
): Promise<Actor | null> {
	const account = email.trim();
	await countTry('sign-in-address', address);
	await countTry('sign-in-pair', account, address);
	await countTry('sign-in-account', account);
	const user = await User.findOne({ where: { email: account } });
	const matches = await isPassword(password, user?.passwordHash ?? null);
	if (!user || !matches || user.deactivatedAt) {
		// Also written where there is no account: the answer must take as long.
		await audit({
			actorId: null,
			action: 'session.refused',
			subject: user ? subject(user) : undefined
		});
		return null;
	}
	await takeBackTry('sign-in-address', address);
	await forgetTries('sign-in-pair', account, address);
	await takeBackTry('sign-in-account', account);
	await audit({ actorId: user.id, action: 'session.started' });
	return actorOf(user);
}

const subject = (user: User) => ({ type: 'user' as const, id: user.id });

/** The person of a session, as the database knows them now; null when the session is worth nothing. */
export async function actorOfSession(id: unknown, sessionVersion: unknown): Promise<Actor | null> {
	if (typeof id !== 'string' || !isUuid(id)) return null;
	database();
	const user = await User.findByPk(id);
	if (!user || user.deactivatedAt || user.sessionVersion !== sessionVersion) return null;
	return actorOf(user);
}

/**
 * Sends a link for a new password, if there is such an account. Gives nothing back, and does its work
 * after the answer, so that neither words nor time tell whether the account exists.
 * @throws Refusal `too-many` for a network address that asks too often.
 */
export async function requestReset(email: string, address: string): Promise<void> {
	database();
	await countTry('reset-address', address);
	void sendReset(email.trim()).catch((problem: Error) => {
		if (!(problem instanceof Refusal)) log().error({ reason: problem.message }, 'password reset');
	});
}

/** The part of requestReset that happens after the answer; apart for tests. */
export async function sendReset(email: string): Promise<void> {
	await countTry('reset-account', email);
	await database().transaction(async (transaction) => {
		const user = await User.findOne({ where: { email, deactivatedAt: null }, transaction });
		if (!user) return;
		const { token, hash } = newToken();
		const expiresAt = new Date(Date.now() + RESET_MINUTES * 60_000);
		await PasswordReset.create(
			{ userId: user.id, tokenHash: hash, purpose: 'reset', expiresAt },
			{ transaction }
		);
		const href = `${env().ORIGIN}/reset/${token}`;
		await queueLetter(
			resetLetter({ name: user.name, href, minutes: RESET_MINUTES }),
			user.email,
			transaction
		);
		await audit(
			{ actorId: null, action: 'password.reset_asked', subject: subject(user) },
			transaction
		);
	});
}

const DEAD_LINK = () =>
	new Refusal('expired', 'This link has been used, has expired, or was copied incompletely.');

const usable = (hash: string) => ({
	tokenHash: hash,
	usedAt: null,
	expiresAt: { [Op.gt]: new Date() }
});

/**
 * Whose password the link sets.
 * @throws Refusal `expired` for a link that no longer works or never did, `too-many`.
 */
export async function readReset(
	token: string,
	address: string
): Promise<{ email: string; name: string; purpose: 'reset' | 'welcome' }> {
	database();
	await countTry('token-address', address);
	const hash = hashOfToken(token);
	const reset = hash && (await PasswordReset.findOne({ where: usable(hash), include: 'user' }));
	if (!reset || !reset.user || reset.user.deactivatedAt) throw DEAD_LINK();
	return { email: reset.user.email, name: reset.user.name, purpose: reset.purpose };
}

/**
 * Sets the password by a link from a mail. The link and every other open one of the account are used
 * up, and every session of the account ends.
 * @returns the account's address, to sign in with.
 */
export async function setPasswordByLink(
	token: string,
	password: string,
	address: string
): Promise<string> {
	const { email, name } = await readReset(token, address);
	const fault = passwordFault(password, { email, name });
	if (fault) throw new Refusal('invalid', fault, 'password');
	// Outside the transaction: it takes long.
	const passwordHash = await hashPassword(password);
	const owner = await database().transaction(async (transaction) => {
		const where = usable(hashOfToken(token) as string);
		const reset = await PasswordReset.findOne({ where, lock: true, transaction });
		const user = reset && (await User.findByPk(reset.userId, { lock: true, transaction }));
		if (!user || user.deactivatedAt) throw DEAD_LINK();
		await user.update({ passwordHash, sessionVersion: user.sessionVersion + 1 }, { transaction });
		await PasswordReset.update(
			{ usedAt: new Date() },
			{ where: { userId: user.id, usedAt: null }, transaction }
		);
		await audit(
			{ actorId: user.id, action: 'password.set_by_link', subject: subject(user) },
			transaction
		);
		if (reset.purpose === 'reset') {
			await queueLetter(passwordChangedLetter(noticeFacts(user)), user.email, transaction);
		}
		return user.email;
	});
	// Whoever reads the account's mail is its owner: a stranger's tries must not keep them out.
	await forgetTries('sign-in-account', owner);
	await forgetTries('sign-in-pair', owner, address);
	return owner;
}

const noticeFacts = (user: User) => ({ name: user.name, href: `${env().ORIGIN}/forgot` });

/** Changes the actor's own password; every session, this one too, ends. */
export async function changePassword(
	actor: Actor,
	current: string,
	password: string
): Promise<void> {
	database();
	await countTry('password-change', actor.id);
	const known = await User.findByPk(actor.id);
	if (!known || !(await isPassword(current, known.passwordHash))) {
		throw new Refusal('invalid', 'This is not your present password.', 'current');
	}
	await forgetTries('password-change', actor.id);
	const fault = passwordFault(password, actor);
	if (fault) throw new Refusal('invalid', fault, 'password');
	if (password === current) {
		throw new Refusal('invalid', 'Choose a password other than the present one.', 'password');
	}
	const passwordHash = await hashPassword(password);
	await database().transaction(async (transaction) => {
		const user = await User.findByPk(actor.id, { lock: true, transaction });
		if (!user || user.deactivatedAt) throw new Refusal('forbidden', 'This account is closed.');
		await user.update({ passwordHash, sessionVersion: user.sessionVersion + 1 }, { transaction });
		await PasswordReset.update(
			{ usedAt: new Date() },
			{ where: { userId: user.id, usedAt: null }, transaction }
		);
		await queueLetter(passwordChangedLetter(noticeFacts(user)), user.email, transaction);
		await audit(
			{ actorId: actor.id, action: 'password.changed', subject: subject(user) },
			transaction
		);
	});
}

/** Changes how the actor's name is shown. */
export async function changeName(actor: Actor, name: string): Promise<void> {
	await database().transaction(async (transaction) => {
		const user = await User.findByPk(actor.id, { lock: true, transaction });
		if (!user) throw new Refusal('not-found', 'There is no such account.');
		const before = user.name;
		await user.update({ name: name.trim() }, { transaction });
		await audit(
			{ actorId: actor.id, action: 'user.renamed', subject: subject(user), detail: { before } },
			transaction
		);
	});
}

/** Ends every session of the actor, this one too. */
export async function signOutEverywhere(actor: Actor): Promise<void> {
	await database().transaction(async (transaction) => {
		await User.increment('sessionVersion', { by: 1, where: { id: actor.id }, transaction });
		await audit(
			{
				actorId: actor.id,
				action: 'session.ended_everywhere',
				subject: { type: 'user', id: actor.id }
			},
			transaction
		);
	});
}
