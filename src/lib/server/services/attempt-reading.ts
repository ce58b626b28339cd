import { QueryTypes } from 'sequelize';
import type {
	BlockResult,
	BlockSpec,
	DeviceFacts,
	RawTrial,
	ScoredDrillId
} from '../../drills/types';
import type { Actor } from '../auth';
import { database } from '../database';
import { Refusal } from '../refusal';
import { classStudentScope, isUuid, ownScope, type Scope } from './visibility';

const PAGE = 50;

export interface AttemptSummary {
	id: string;
	drill: ScoredDrillId;
	engineVersion: number;
	score: number;
	/** Median |error| in cents with its 95 % interval. */
	medianAbsErrorCents: number;
	errorLowCents: number;
	errorHighCents: number;
	inside: number;
	count: number;
	seconds: number;
	/** ISO 8601, UTC. */
	startedAt: string;
	finishedAt: string;
}

type Dated<T> = Omit<T, 'startedAt' | 'finishedAt'> & { startedAt: Date; finishedAt: Date };

function written<T extends { startedAt: Date; finishedAt: Date }>(row: T) {
	return {
		...row,
		startedAt: row.startedAt.toISOString(),
		finishedAt: row.finishedAt.toISOString()
	};
}

/**
 * The actor's own attempts, newest first, fifty at a time.
 * @param cursor what the page before gave as `nextCursor`; null for the first page.
 * @throws Refusal 'invalid' for a cursor that no page gave.
 */
export async function listOwnAttempts(
	actor: Actor,
	cursor: string | null
): Promise<{ attempts: AttemptSummary[]; nextCursor: string | null }> {
	const after = cursor === null ? null : readCursor(cursor);
	const rows = await database().query<Dated<AttemptSummary>>(
		`SELECT id, drill, engine_version AS "engineVersion", server_score AS score,
			error_median AS "medianAbsErrorCents", error_low AS "errorLowCents",
			error_high AS "errorHighCents", inside, trial_count AS count, seconds,
			started_at AS "startedAt", finished_at AS "finishedAt"
		FROM attempt
		WHERE student_id = :actorId
			${after ? 'AND (finished_at, id) < (CAST(:at AS timestamptz), CAST(:id AS uuid))' : ''}
		ORDER BY finished_at DESC, id DESC LIMIT ${PAGE + 1}`,
		{
			type: QueryTypes.SELECT,
			replacements: { actorId: actor.id, at: after?.at ?? null, id: after?.id ?? null }
		}
	);
	const attempts = rows.slice(0, PAGE).map(written);
	const last = attempts.at(-1);
	return {
		attempts,
		nextCursor: rows.length > PAGE && last ? writeCursor(last.finishedAt, last.id) : null
	};
}

function writeCursor(at: string, id: string): string {
	return Buffer.from(`${at} ${id}`).toString('base64url');
}

function readCursor(cursor: string): { at: string; id: string } {
	const [at = '', id = ''] = Buffer.from(cursor, 'base64url').toString().split(' ');
	const lawful = /^\d{4}-\d\d-\d\dT\d\d:\d\d:\d\d\.\d{3}Z$/.test(at) && isUuid(id);
	if (!lawful || Number.isNaN(Date.parse(at)) || at < '1970') {
		throw new Refusal('invalid', 'This place in the list is not known. Start from its beginning.');
	}
	return { at, id };
}

/** Everything the reveal of an attempt shows. */
export interface AttemptView {
	id: string;
	drill: ScoredDrillId;
	engineVersion: number;
	seed: number;
	stimulus: BlockSpec;
	trials: RawTrial[];
	result: BlockResult;
	device: DeviceFacts;
	score: number;
	/** The 95 % interval of the median |error|, cents. */
	interval: [low: number, high: number];
	scoreFlagged: boolean;
	/** ISO 8601, UTC. */
	startedAt: string;
	finishedAt: string;
	student: { id: string; name: string };
}

/** An attempt of the actor's own. @throws Refusal 'not-found'. */
export async function ownAttempt(actor: Actor, attemptId: string): Promise<AttemptView> {
	return attemptIn(ownScope(actor), attemptId);
}

/** An attempt of a student in a class where the actor teaches. @throws Refusal 'not-found'. */
export async function studentAttempt(
	actor: Actor,
	classId: string,
	studentId: string,
	attemptId: string
): Promise<AttemptView> {
	return attemptIn(classStudentScope(actor, classId, studentId), attemptId);
}

type AttemptRow = Dated<Omit<AttemptView, 'student' | 'seed' | 'interval'>> & {
	errorLow: number;
	errorHigh: number;
	/** bigint arrives as text. */
	seed: string;
	studentId: string;
	studentName: string;
};

async function attemptIn(scope: Scope, attemptId: string): Promise<AttemptView> {
	if (!isUuid(attemptId)) throw new Refusal('not-found', 'There is no such attempt.');
	const [row] = await database().query<AttemptRow>(
		`WITH ${scope.cte}
		SELECT a.id, a.drill, a.engine_version AS "engineVersion", a.seed, a.stimulus, a.trials,
			a.result, a.device, a.error_low AS "errorLow", a.error_high AS "errorHigh",
			a.server_score AS score, a.score_flagged AS "scoreFlagged",
			a.started_at AS "startedAt", a.finished_at AS "finishedAt",
			u.id AS "studentId", u.name AS "studentName"
		FROM visible v
		JOIN attempt a ON a.student_id = v.student_id AND a.day >= v.since
		JOIN "user" u ON u.id = a.student_id
		WHERE a.id = :attemptId`,
		{ type: QueryTypes.SELECT, replacements: { ...scope.values, attemptId } }
	);
	if (!row) throw new Refusal('not-found', 'There is no such attempt.');
	const { studentId, studentName, seed, errorLow, errorHigh, ...rest } = row;
	return {
		...written(rest),
		interval: [errorLow, errorHigh],
		seed: Number(seed),
		student: { id: studentId, name: studentName }
	};
}
