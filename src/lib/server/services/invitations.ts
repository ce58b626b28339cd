import { Op, QueryTypes, type Transaction } from 'sequelize';
import type { Actor } from '../auth';
import { hashPassword } from '../auth/password';
import { passwordFault } from '../auth/password-rules';
import { countTry } from '../auth/rate-limit';
import { hashOfToken, newToken } from '../auth/tokens';
import { database } from '../database';
import { env } from '../env';
import { invitationLetter } from '../mail/templates';
import { Invitation, User } from '../models';
import { Refusal } from '../refusal';
import { audit } from './audit';
import { ownClass } from './classes';
import { queueLetter } from './mail';
import { takePlace } from './places';
import { isUuid } from './visibility';

const DAYS = 14;

export interface InvitationLine {
	id: string;
	email: string;
	createdAt: Date;
	expiresAt: Date;
	/** Asked for through the join link, not sent by an instructor. */
	byJoinLink: boolean;
	expired: boolean;
}

/** Invitations of a class that nobody has accepted or withdrawn, newest first. */
export async function listInvitations(actor: Actor, classId: string): Promise<InvitationLine[]> {
	await ownClass(actor, classId);
	return database().query<InvitationLine>(
		`SELECT id, email, created_at AS "createdAt", expires_at AS "expiresAt",
			invited_by IS NULL AS "byJoinLink", expires_at <= now() AS expired
		FROM invitation
		WHERE class_id = :classId AND accepted_at IS NULL AND revoked_at IS NULL
		ORDER BY created_at DESC`,
		{ type: QueryTypes.SELECT, replacements: { classId } }
	);
}

/** Writes an invitation and its letter; an older one for the same address stops working. */
export async function sendInvitation(
	facts: { classId: string; className: string; email: string; inviter: Actor | null },
	transaction: Transaction
): Promise<void> {
	const { classId, className, email, inviter } = facts;
	await Invitation.update(
		{ revokedAt: new Date() },
		{ where: { classId, email, acceptedAt: null, revokedAt: null }, transaction }
	);
	const { token, hash } = newToken();
	const expiresAt = new Date(Date.now() + DAYS * 86_400_000);
	const made = await Invitation.create(
		{ classId, email, tokenHash: hash, invitedBy: inviter?.id ?? null, expiresAt },
		{ transaction }
	);
	const href = `${env().ORIGIN}/invitation/${token}`;
	const letter = invitationLetter({
		className,
		inviterName: inviter?.name ?? null,
		href,
		days: DAYS
	});
	await queueLetter(letter, email, transaction);
	await audit(
		{
			actorId: inviter?.id ?? null,
			action: 'invitation.sent',
			subject: { type: 'invitation', id: made.id },
			detail: { classId }
		},
		transaction
	);
}

/**
 * Offers a place in the actor's class to an e-mail address.
 * @throws Refusal `conflict` when its owner is in the class already.
 */
export async function inviteByEmail(actor: Actor, classId: string, email: string): Promise<void> {
	database();
	const address = email.trim();
	await countTry('invite-actor', actor.id);
	await database().transaction(async (transaction) => {
		const found = await ownClass(actor, classId, transaction, true);
		if (found.archivedAt) throw new Refusal('conflict', 'This class has been put away.');
		const member = await User.findOne({
			where: { email: address },
			include: { association: 'memberships', where: { classId, leftAt: null }, required: true },
			transaction
		});
		if (member) throw new Refusal('conflict', `${member.name} is in this class already.`, 'email');
		await sendInvitation(
			{ classId, className: found.name, email: address, inviter: actor },
			transaction
		);
	});
}

/** Withdraws an invitation that nobody has accepted; its link stops working. */
export async function revokeInvitation(
	actor: Actor,
	classId: string,
	invitationId: string
): Promise<void> {
	await database().transaction(async (transaction) => {
		await ownClass(actor, classId, transaction);
		const where = { id: invitationId, classId, acceptedAt: null, revokedAt: null };
		const [changed] = isUuid(invitationId)
			? await Invitation.update({ revokedAt: new Date() }, { where, transaction })
			: [0];
		if (!changed)
			throw new Refusal('not-found', 'This invitation was answered or withdrawn already.');
		const subject = { type: 'invitation' as const, id: invitationId };
		await audit({ actorId: actor.id, action: 'invitation.revoked', subject }, transaction);
	});
}

const DEAD_LINK = () =>
	new Refusal(
		'expired',
		'This invitation has been used, withdrawn or has expired, or the address was copied incompletely. Ask your instructor for a new one.'
	);

async function findOpen(token: string, transaction?: Transaction): Promise<Invitation> {
	const hash = hashOfToken(token);
	const found =
		hash &&
		(await Invitation.findOne({
			where: {
				tokenHash: hash,
				acceptedAt: null,
				revokedAt: null,
				expiresAt: { [Op.gt]: new Date() }
			},
			include: transaction ? undefined : ['class', 'inviter'],
			lock: Boolean(transaction),
			transaction
		}));
	if (!found) throw DEAD_LINK();
	return found;
}

export interface OpenInvitation {
	className: string;
	inviterName: string | null;
	email: string;
	/** What the person has to do: choose a password, sign in, or just take the place. */
	next: 'make-account' | 'sign-in' | 'take-place' | 'wrong-account';
}

/**
 * What an invitation's link offers to whoever opened it.
 * @throws Refusal `expired` or `too-many`.
 */
export async function readInvitation(
	token: string,
	actor: Actor | null,
	address: string
): Promise<OpenInvitation> {
	database();
	await countTry('token-address', address);
	const found = await findOpen(token);
	if (!found.class || found.class.archivedAt) throw DEAD_LINK();
	const owner = await User.findOne({ where: { email: found.email } });
	let next: OpenInvitation['next'] = owner ? 'sign-in' : 'make-account';
	if (actor) next = owner?.id === actor.id ? 'take-place' : 'wrong-account';
	return {
		className: found.class.name,
		inviterName: found.inviter?.name ?? null,
		email: found.email,
		next
	};
}

/** Takes the place for a person who has an account and is signed in to it. */
export async function acceptAsMember(token: string, actor: Actor): Promise<void> {
	await database().transaction(async (transaction) => {
		const invitation = await findOpen(token, transaction);
		const user = await User.findByPk(actor.id, { transaction });
		if (!user || user.email.toLowerCase() !== invitation.email.toLowerCase()) {
			throw new Refusal('forbidden', 'This invitation was sent to another address.');
		}
		await accept(invitation, user, transaction);
	});
}

/**
 * Makes the account of an invited person and takes the place, in one step.
 * @returns the account's address, to sign in with.
 */
export async function acceptAsNewcomer(
	token: string,
	facts: { name: string; password: string },
	address: string
): Promise<string> {
	const { email } = await readInvitation(token, null, address);
	const fault = passwordFault(facts.password, { email, name: facts.name });
	if (fault) throw new Refusal('invalid', fault, 'password');
	const passwordHash = await hashPassword(facts.password);
	return database().transaction(async (transaction) => {
		const invitation = await findOpen(token, transaction);
		const [user, made] = await User.findOrCreate({
			where: { email: invitation.email },
			defaults: { email: invitation.email, name: facts.name.trim(), role: 'student', passwordHash },
			transaction
		});
		if (!made)
			throw new Refusal(
				'conflict',
				'There is an account with this address. Sign in to take the place.'
			);
		const subject = { type: 'user' as const, id: user.id };
		await audit(
			{ actorId: user.id, action: 'user.created', subject, detail: { role: 'student' } },
			transaction
		);
		await accept(invitation, user, transaction);
		return user.email;
	});
}

async function accept(invitation: Invitation, user: User, transaction: Transaction): Promise<void> {
	await takePlace(invitation.classId, user, transaction);
	await invitation.update({ acceptedAt: new Date(), acceptedBy: user.id }, { transaction });
	const subject = { type: 'invitation' as const, id: invitation.id };
	const detail = { classId: invitation.classId };
	await audit({ actorId: user.id, action: 'invitation.accepted', subject, detail }, transaction);
}
