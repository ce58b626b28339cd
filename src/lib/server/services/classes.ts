import { QueryTypes, type Transaction } from 'sequelize';
import type { Actor } from '../auth';
import { joinToken } from '../auth/tokens';
import { database } from '../database';
import { env } from '../env';
import { Class, Membership } from '../models';
import { Refusal } from '../refusal';
import { audit } from './audit';
import { isUuid } from './visibility';

export interface ClassLine {
	id: string;
	name: string;
	/** ISO days, or null. */
	startsOn: string | null;
	endsOn: string | null;
	archived: boolean;
	students: number;
	/** Invitations that nobody has answered yet. */
	invited: number;
}

const NOT_YOURS = () => new Refusal('not-found', 'There is no such class among yours.');

/**
 * A class in which the actor teaches. Another's class answers like one that does not exist.
 * @throws Refusal `not-found`.
 */
export async function ownClass(
	actor: Actor,
	classId: string,
	transaction?: Transaction,
	lock = false
): Promise<Class> {
	if (!isUuid(classId)) throw NOT_YOURS();
	database();
	const found = await Class.findOne({
		where: { id: classId },
		include: {
			association: 'memberships',
			attributes: [],
			where: { userId: actor.id, role: 'instructor', leftAt: null },
			required: true
		},
		// Locks the class alone, not the membership that proves the right to it.
		lock: lock && transaction ? { level: transaction.LOCK.UPDATE, of: Class } : undefined,
		transaction
	});
	if (!found) throw NOT_YOURS();
	return found;
}

/** The classes in which the actor teaches; present ones first, then by start. */
export async function listClasses(actor: Actor): Promise<ClassLine[]> {
	return database().query<ClassLine>(
		`SELECT c.id, c.name, c.starts_on::text AS "startsOn", c.ends_on::text AS "endsOn",
			c.archived_at IS NOT NULL AS archived,
			(SELECT count(*)::int FROM membership s
				WHERE s.class_id = c.id AND s.role = 'student' AND s.left_at IS NULL) AS students,
			(SELECT count(DISTINCT i.email)::int FROM invitation i
				WHERE i.class_id = c.id AND i.accepted_at IS NULL AND i.revoked_at IS NULL
				AND i.expires_at > now()) AS invited
		FROM class c
		JOIN membership m ON m.class_id = c.id AND m.user_id = :actorId
			AND m.role = 'instructor' AND m.left_at IS NULL
		ORDER BY c.archived_at IS NOT NULL, c.starts_on DESC NULLS LAST, c.name`,
		{ type: QueryTypes.SELECT, replacements: { actorId: actor.id } }
	);
}

export interface ClassFacts {
	name: string;
	/** ISO days; empty or null where not known yet. */
	startsOn?: string | null;
	endsOn?: string | null;
}

function checkedFacts(facts: ClassFacts) {
	const startsOn = facts.startsOn || null;
	const endsOn = facts.endsOn || null;
	if (startsOn && endsOn && endsOn < startsOn) {
		throw new Refusal('invalid', 'The last day is before the first.', 'endsOn');
	}
	return { name: facts.name.trim(), startsOn, endsOn };
}

/** Opens a class; whoever opens it teaches it. */
export async function createClass(actor: Actor, facts: ClassFacts): Promise<{ id: string }> {
	if (actor.role !== 'instructor') throw new Refusal('forbidden', 'Only instructors open classes.');
	const checked = checkedFacts(facts);
	return database().transaction(async (transaction) => {
		const made = await Class.create(checked, { transaction });
		await Membership.create(
			{ classId: made.id, userId: actor.id, role: 'instructor' },
			{ transaction }
		);
		await audit(deed(actor, 'class.opened', made.id), transaction);
		return { id: made.id };
	});
}

/** Changes a class's name and days. */
export async function changeClass(actor: Actor, classId: string, facts: ClassFacts): Promise<void> {
	const checked = checkedFacts(facts);
	await database().transaction(async (transaction) => {
		const found = await ownClass(actor, classId, transaction, true);
		await found.update(checked, { transaction });
		await audit(deed(actor, 'class.changed', classId), transaction);
	});
}

/** Puts a class away or takes it out again; nobody can join while it is away. */
export async function archiveClass(
	actor: Actor,
	classId: string,
	archived: boolean
): Promise<void> {
	await database().transaction(async (transaction) => {
		const found = await ownClass(actor, classId, transaction, true);
		await found.update({ archivedAt: archived ? new Date() : null }, { transaction });
		await audit(
			deed(actor, archived ? 'class.archived' : 'class.unarchived', classId),
			transaction
		);
	});
}

/** The address by which anybody who has it may ask to join the class. */
export async function joinLink(actor: Actor, classId: string): Promise<string> {
	const found = await ownClass(actor, classId);
	return `${env().ORIGIN}/join/${joinToken(found.id, found.joinLinkVersion)}`;
}

/**
 * Makes the present join link worthless.
 * @returns the new one.
 */
export async function revokeJoinLink(actor: Actor, classId: string): Promise<string> {
	return database().transaction(async (transaction) => {
		const found = await ownClass(actor, classId, transaction, true);
		await found.update({ joinLinkVersion: found.joinLinkVersion + 1 }, { transaction });
		await audit(deed(actor, 'class.join_link_revoked', classId), transaction);
		return `${env().ORIGIN}/join/${joinToken(found.id, found.joinLinkVersion)}`;
	});
}

/** Takes a student out of the class; their own records stay theirs. */
export async function removeStudent(
	actor: Actor,
	classId: string,
	studentId: string
): Promise<void> {
	if (!isUuid(studentId)) throw new Refusal('not-found', 'There is no such student in this class.');
	await database().transaction(async (transaction) => {
		await ownClass(actor, classId, transaction);
		const [changed] = await Membership.update(
			{ leftAt: new Date() },
			{ where: { classId, userId: studentId, role: 'student', leftAt: null }, transaction }
		);
		if (!changed) throw new Refusal('not-found', 'There is no such student in this class.');
		await audit(
			{ ...deed(actor, 'class.student_removed', classId), detail: { studentId } },
			transaction
		);
	});
}

const deed = (actor: Actor, action: string, classId: string) => ({
	actorId: actor.id,
	action,
	subject: { type: 'class' as const, id: classId }
});
