import type { Transaction } from 'sequelize';
import type { Actor } from '../auth';
import { countTry } from '../auth/rate-limit';
import { classOfJoinToken, provesJoin } from '../auth/tokens';
import { database } from '../database';
import { log } from '../log';
import { Class, Membership, User } from '../models';
import { Refusal } from '../refusal';
import { audit } from './audit';
import { sendInvitation } from './invitations';
import { takePlace } from './places';

const DEAD_LINK = () =>
	new Refusal(
		'expired',
		'This join link has been withdrawn or was copied incompletely. Ask your instructor for the present one.'
	);

async function findClass(token: string, transaction?: Transaction): Promise<Class> {
	const id = classOfJoinToken(token);
	const found = id && (await Class.findByPk(id, { transaction }));
	if (!found || found.archivedAt || !provesJoin(token, found.id, found.joinLinkVersion)) {
		throw DEAD_LINK();
	}
	return found;
}

/**
 * Which class a join link opens, and who teaches it.
 * @throws Refusal `expired` or `too-many`.
 */
export async function readJoinLink(
	token: string,
	address: string
): Promise<{ className: string; instructors: string[] }> {
	database();
	await countTry('token-address', address);
	const found = await findClass(token);
	const teachers = await Membership.findAll({
		where: { classId: found.id, role: 'instructor', leftAt: null },
		include: 'user',
		order: [['joinedAt', 'ASC']]
	});
	return { className: found.name, instructors: teachers.flatMap((t) => t.user?.name ?? []) };
}

/** Takes a place in the class for the signed-in person. */
export async function joinByLink(actor: Actor, token: string): Promise<void> {
	await database().transaction(async (transaction) => {
		const found = await findClass(token, transaction);
		const user = await User.findByPk(actor.id, { transaction });
		if (!user) throw DEAD_LINK();
		await takePlace(found.id, user, transaction);
		const subject = { type: 'class' as const, id: found.id };
		await audit({ actorId: actor.id, action: 'class.joined_by_link', subject }, transaction);
	});
}

/**
 * Sends a person who is not signed in their own invitation, so that the address is proved to be
 * theirs. Answers alike whether or not there is an account, and before the letter is written.
 * @throws Refusal `expired` for a dead link, `too-many`.
 */
export async function askByLink(token: string, email: string, address: string): Promise<void> {
	database();
	await countTry('join-address', address);
	const found = await findClass(token);
	void sendJoinInvitation(found.id, found.name, email.trim()).catch((problem: Error) => {
		if (!(problem instanceof Refusal)) log().error({ reason: problem.message }, 'join link');
	});
}

/** The part of askByLink that happens after the answer; apart for tests. */
export async function sendJoinInvitation(
	classId: string,
	className: string,
	email: string
): Promise<void> {
	await countTry('join-account', email);
	await database().transaction((transaction) =>
		sendInvitation({ classId, className, email, inviter: null }, transaction)
	);
}
