import { Op, UniqueConstraintError, type Transaction } from 'sequelize';
import type { Actor, Role } from '../auth';
import { newToken } from '../auth/tokens';
import { database } from '../database';
import { env } from '../env';
import { welcomeLetter } from '../mail/templates';
import { PasswordReset, User } from '../models';
import { Refusal } from '../refusal';
import { audit, mustBeAdmin } from './audit';
import { queueLetter } from './mail';
import { isUuid } from './visibility';

const WELCOME_DAYS = 7;
const PAGE = 50;

export interface UserLine {
	id: string;
	email: string;
	name: string;
	role: Role;
	active: boolean;
	/** False until the person has chosen a password. */
	hasPassword: boolean;
	createdAt: Date;
}

const lineOf = (user: User): UserLine => ({
	id: user.id,
	email: user.email,
	name: user.name,
	role: user.role,
	active: user.deactivatedAt === null,
	hasPassword: user.passwordHash !== null,
	createdAt: user.createdAt
});

/**
 * Users whose name or address contains the text, by name, fifty a page.
 * @param page counts from 1.
 */
export async function listUsers(
	actor: Actor,
	{ search = '', page = 1 }: { search?: string; page?: number } = {}
): Promise<{ users: UserLine[]; more: boolean; total: number }> {
	mustBeAdmin(actor);
	database();
	const pattern = `%${search.trim().replace(/[\\%_]/g, '\\$&')}%`;
	const where = search.trim()
		? { [Op.or]: [{ name: { [Op.iLike]: pattern } }, { email: { [Op.iLike]: pattern } }] }
		: {};
	const { rows, count } = await User.findAndCountAll({
		where,
		order: [
			['name', 'ASC'],
			['id', 'ASC']
		],
		limit: PAGE,
		offset: (Math.max(1, page) - 1) * PAGE
	});
	return { users: rows.map(lineOf), more: Math.max(1, page) * PAGE < count, total: count };
}

async function sendWelcome(user: User, transaction: Transaction): Promise<void> {
	const { token, hash } = newToken();
	const expiresAt = new Date(Date.now() + WELCOME_DAYS * 86_400_000);
	await PasswordReset.create(
		{ userId: user.id, tokenHash: hash, purpose: 'welcome', expiresAt },
		{ transaction }
	);
	const href = `${env().ORIGIN}/reset/${token}`;
	const facts = { name: user.name, role: user.role, href, days: WELCOME_DAYS };
	await queueLetter(welcomeLetter(facts), user.email, transaction);
}

/** Makes an account and sends its owner the link to choose a password. */
export async function createUser(
	actor: Actor,
	facts: { email: string; name: string; role: Role }
): Promise<UserLine> {
	mustBeAdmin(actor);
	try {
		return await database().transaction(async (transaction) => {
			const user = await User.create(
				{ email: facts.email.trim(), name: facts.name.trim(), role: facts.role },
				{ transaction }
			);
			await sendWelcome(user, transaction);
			await audit(
				{
					actorId: actor.id,
					action: 'user.created',
					subject: { type: 'user', id: user.id },
					detail: { role: user.role }
				},
				transaction
			);
			return lineOf(user);
		});
	} catch (problem) {
		if (!(problem instanceof UniqueConstraintError)) throw problem;
		throw new Refusal('conflict', 'There is an account with this address already.', 'email');
	}
}

/**
 * Changes one user with the set of active admins locked, so that two admins who act at the same
 * moment cannot take each other's role and leave nobody.
 */
async function changeUser(
	actor: Actor,
	userId: string,
	change: (user: User, transaction: Transaction) => Promise<void>
): Promise<void> {
	mustBeAdmin(actor);
	if (!isUuid(userId)) throw new Refusal('not-found', 'There is no such user.');
	await database().transaction(async (transaction) => {
		// In the order of ids, so that two such changes wait for each other instead of locking up.
		const admins = await User.findAll({
			where: { role: 'admin', deactivatedAt: null },
			order: [['id', 'ASC']],
			lock: true,
			transaction
		});
		// The actor may have lost the role while waiting.
		if (!admins.some((admin) => admin.id === actor.id)) mustBeAdmin({ ...actor, role: 'student' });
		const user = await User.findByPk(userId, { lock: true, transaction });
		if (!user) throw new Refusal('not-found', 'There is no such user.');
		await change(user, transaction);
		const left = await User.count({ where: { role: 'admin', deactivatedAt: null }, transaction });
		if (left === 0) {
			throw new Refusal(
				'conflict',
				'This is the last active admin. Make somebody else an admin first.'
			);
		}
	});
}

/** Closes an account: its sessions end at once and nobody can sign in to it. Its records stay. */
export async function deactivateUser(actor: Actor, userId: string): Promise<void> {
	await changeUser(actor, userId, async (user, transaction) => {
		if (user.deactivatedAt) return;
		await user.update(
			{ deactivatedAt: new Date(), sessionVersion: user.sessionVersion + 1 },
			{ transaction }
		);
		await audit(deed(actor, 'user.deactivated', user), transaction);
	});
}

/** Opens a closed account again, with the password it had. */
export async function reactivateUser(actor: Actor, userId: string): Promise<void> {
	await changeUser(actor, userId, async (user, transaction) => {
		if (!user.deactivatedAt) return;
		await user.update({ deactivatedAt: null }, { transaction });
		await audit(deed(actor, 'user.reactivated', user), transaction);
	});
}

/** Gives a user another role; it counts from their next request on, for roles are read each time. */
export async function changeRole(actor: Actor, userId: string, role: Role): Promise<void> {
	await changeUser(actor, userId, async (user, transaction) => {
		const before = user.role;
		if (before === role) return;
		await user.update({ role }, { transaction });
		await audit(deed(actor, 'user.role_changed', user, { before, after: role }), transaction);
	});
}

/** Sends the link to choose a first password once more; older links stop working. */
export async function sendWelcomeAgain(actor: Actor, userId: string): Promise<void> {
	await changeUser(actor, userId, async (user, transaction) => {
		if (user.passwordHash || user.deactivatedAt) {
			throw new Refusal('conflict', 'This account is closed or has a password already.');
		}
		await PasswordReset.update(
			{ usedAt: new Date() },
			{ where: { userId: user.id, usedAt: null }, transaction }
		);
		await sendWelcome(user, transaction);
		await audit(deed(actor, 'user.welcomed_again', user), transaction);
	});
}

const deed = (actor: Actor, action: string, user: User, detail = {}) => ({
	actorId: actor.id,
	action,
	subject: { type: 'user' as const, id: user.id },
	detail
});

/**
 * Makes the very first admin of an empty installation.
 * @returns the link by which they choose a password, or null when there are users already.
 */
export async function createFirstAdmin(email: string, name: string): Promise<string | null> {
	return database().transaction(async (transaction) => {
		if ((await User.count({ transaction })) > 0) return null;
		const user = await User.create({ email, name, role: 'admin' }, { transaction });
		const { token, hash } = newToken();
		const expiresAt = new Date(Date.now() + WELCOME_DAYS * 86_400_000);
		await PasswordReset.create(
			{ userId: user.id, tokenHash: hash, purpose: 'welcome', expiresAt },
			{ transaction }
		);
		await audit(
			{ actorId: null, action: 'user.created', subject: { type: 'user', id: user.id } },
			transaction
		);
		return `${env().ORIGIN}/reset/${token}`;
	});
}
