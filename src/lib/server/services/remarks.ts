import { QueryTypes } from 'sequelize';
import type { Actor } from '../auth';
import { database } from '../database';
import { Refusal } from '../refusal';
import type { ScoredDrillId } from '../../drills/types';
import { classStudentScope, isUuid, ownScope, type Scope } from './visibility';

/** Longest remark, in characters. */
export const LONGEST_REMARK = 2000;

export interface RemarkView {
	id: string;
	text: string;
	author: string;
	/** ISO 8601, UTC. */
	createdAt: string;
	seenAt: string | null;
	attempt: { id: string; drill: ScoredDrillId; finishedAt: string } | null;
}

/**
 * Writes to a present student of a class in which the actor teaches, about one of the student's
 * attempts or in general.
 * @throws Refusal 'invalid' for no words or too many, 'not-found' for anybody or anything else.
 */
export async function writeRemark(
	actor: Actor,
	to: { classId: string; studentId: string; attemptId: string | null },
	words: string
): Promise<{ id: string }> {
	const text = words.replace(/\0/g, '').trim();
	if (!text) throw new Refusal('invalid', 'Write something first.', 'text');
	if ([...text].length > LONGEST_REMARK) {
		throw new Refusal('invalid', `At most ${LONGEST_REMARK} characters, please.`, 'text');
	}
	const scope = classStudentScope(actor, to.classId, to.studentId);
	if (to.attemptId !== null && !isUuid(to.attemptId)) throw unknownAttempt();
	const rows = await database().query<{ id: string }>(
		`WITH ${scope.cte}
		INSERT INTO remark (student_id, author_id, attempt_id, text)
		SELECT v.student_id, CAST(:actorId AS uuid), CAST(:attemptId AS uuid), :text
		FROM visible v
		WHERE CAST(:attemptId AS uuid) IS NULL OR EXISTS (
			SELECT FROM attempt a
			WHERE a.id = CAST(:attemptId AS uuid) AND a.student_id = v.student_id AND a.day >= v.since
		)
		RETURNING id`,
		{ type: QueryTypes.SELECT, replacements: { ...scope.values, attemptId: to.attemptId, text } }
	);
	if (rows.length === 1) return rows[0];
	throw to.attemptId === null
		? new Refusal('not-found', 'There is no such student in this class.')
		: unknownAttempt();
}

function unknownAttempt(): Refusal {
	return new Refusal('not-found', 'There is no such attempt of this student.');
}

/** The actor's own remarks, newest first. `unseenOnly`: those not yet put away. */
export async function ownRemarks(
	actor: Actor,
	options: { unseenOnly?: boolean; limit?: number } = {}
): Promise<RemarkView[]> {
	return remarksIn(ownScope(actor), options);
}

/** Remarks to one student, from the day of joining the class on; written by anyone. */
export async function remarksIn(
	scope: Scope,
	{ unseenOnly = false, limit = 50 }: { unseenOnly?: boolean; limit?: number } = {}
): Promise<RemarkView[]> {
	type Row = {
		id: string;
		text: string;
		author: string;
		createdAt: Date;
		seenAt: Date | null;
		attemptId: string | null;
		drill: ScoredDrillId | null;
		finishedAt: Date | null;
	};
	const rows = await database().query<Row>(
		`WITH ${scope.cte}
		SELECT r.id, r.text, w.name AS author, r.created_at AS "createdAt", r.seen_at AS "seenAt",
			a.id AS "attemptId", a.drill, a.finished_at AS "finishedAt"
		FROM visible v
		JOIN remark r ON r.student_id = v.student_id AND r.created_at >= v.since
		JOIN "user" w ON w.id = r.author_id
		LEFT JOIN attempt a ON a.id = r.attempt_id
		${unseenOnly ? 'WHERE r.seen_at IS NULL' : ''}
		ORDER BY r.created_at DESC, r.id LIMIT :limit`,
		{ type: QueryTypes.SELECT, replacements: { ...scope.values, limit } }
	);
	return rows.map(({ attemptId, drill, finishedAt, ...row }) => ({
		...row,
		createdAt: row.createdAt.toISOString(),
		seenAt: row.seenAt?.toISOString() ?? null,
		attempt:
			attemptId && drill && finishedAt
				? { id: attemptId, drill, finishedAt: finishedAt.toISOString() }
				: null
	}));
}

/**
 * The student puts a remark away; again does nothing.
 * @throws Refusal 'not-found' when it is not the actor's.
 */
export async function markRemarkSeen(actor: Actor, remarkId: string): Promise<void> {
	if (!isUuid(remarkId)) throw new Refusal('not-found', 'There is no such remark.');
	const rows = await database().query(
		`UPDATE remark SET seen_at = COALESCE(seen_at, now())
		WHERE id = :remarkId AND student_id = :actorId RETURNING id`,
		{ type: QueryTypes.SELECT, replacements: { remarkId, actorId: actor.id } }
	);
	if (rows.length === 0) throw new Refusal('not-found', 'There is no such remark.');
}
