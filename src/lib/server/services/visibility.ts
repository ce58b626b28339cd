import type { Actor } from '../auth';
import { Refusal } from '../refusal';

/**
 * Whose records a query may reach. Every reading query starts `WITH ${scope.cte}` and joins `visible`
 * (student_id, since): the border stands in the query itself, nothing is filtered afterwards.
 * `since` is the first day, UTC, whose records count.
 */
export interface Scope {
	readonly cte: string;
	readonly values: Readonly<Record<string, string>>;
}

const UUID = /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/i;

/** True for text that PostgreSQL takes as a uuid. */
export function isUuid(value: string): boolean {
	return UUID.test(value);
}

/** The actor's own records, all of them. */
export function ownScope(actor: Actor): Scope {
	return {
		cte: `visible (student_id, since) AS (SELECT CAST(:actorId AS uuid), DATE '0001-01-01')`,
		values: { actorId: actor.id }
	};
}

const TAUGHT = `
	SELECT s.user_id, (s.joined_at AT TIME ZONE 'UTC')::date
	FROM membership s
	JOIN membership i ON i.class_id = s.class_id AND i.user_id = :actorId
		AND i.role = 'instructor' AND i.left_at IS NULL
	WHERE s.class_id = :classId AND s.role = 'student' AND s.left_at IS NULL`;

/**
 * The present students of a class in which the actor teaches, from the day each joined it.
 * @throws Refusal 'not-found' for something that is not an id.
 */
export function classScope(actor: Actor, classId: string): Scope {
	return {
		cte: `visible (student_id, since) AS (${TAUGHT})`,
		values: { actorId: actor.id, classId: idOrRefuse(classId, 'There is no such class.') }
	};
}

/** One present student of a class in which the actor teaches, from the day of joining it. */
export function classStudentScope(actor: Actor, classId: string, studentId: string): Scope {
	const { values } = classScope(actor, classId);
	return {
		cte: `visible (student_id, since) AS (${TAUGHT} AND s.user_id = :studentId)`,
		values: {
			...values,
			studentId: idOrRefuse(studentId, 'There is no such student in this class.')
		}
	};
}

function idOrRefuse(value: string, sentence: string): string {
	if (!isUuid(value)) throw new Refusal('not-found', sentence);
	return value;
}
