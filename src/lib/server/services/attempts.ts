import { Transaction } from 'sequelize';
import { checkSubmission } from '../../drills/submission';
import type { AttemptSubmission, BlockResult } from '../../drills/types';
import type { Actor } from '../auth';
import { database } from '../database';
import { Attempt } from '../models';
import { Refusal } from '../refusal';
import { refreshDay } from './attempt-rollup';
import { audit, type Deed } from './audit';
import { contentHash } from './content-hash';
import { medianWithInterval } from './median-interval';

/** A client's score may differ from the server's by this much; more is flagged and audited. */
export const SCORE_TOLERANCE = 1e-6;
/** Longest stretch of one trial that counts as practice, in milliseconds: a page left open is not. */
const LONGEST_TRIAL_MS = 300_000;

export interface StoredAttempt {
	id: string;
	/** False when it had been stored before. */
	created: boolean;
	/** The server's score; the one that counts. */
	score: number;
	scoreFlagged: boolean;
	result: BlockResult;
}

/**
 * Stores an attempt of the actor's own, once: sending the same again gives what was stored. The score
 * is recomputed from the raw trials by the rules of the attempt's engine version.
 * @throws Refusal 'invalid' for what is malformed or cannot have happened, 'conflict' for another
 * attempt under an id already used, 'not-found' when the id is another student's.
 */
export async function storeAttempt(
	actor: Actor,
	body: unknown,
	now = new Date()
): Promise<StoredAttempt> {
	const check = checkSubmission(body);
	if (!check.ok) throw new Refusal('invalid', check.reason);
	const row = rowOf(actor, check.submission, check.result, now);
	return database().transaction(
		{ isolationLevel: Transaction.ISOLATION_LEVELS.READ_COMMITTED },
		async (transaction) => {
			if (!(await insertOnce(row, transaction))) return repeated(actor, row, transaction);
			await refreshDay(row, transaction);
			if (row.scoreFlagged) await audit(differs(row), transaction);
			return { ...stored(row), created: true };
		}
	);
}

type Row = ReturnType<typeof rowOf>;

function rowOf(actor: Actor, submission: AttemptSubmission, result: BlockResult, now: Date) {
	const finishedMs = Date.parse(submission.finishedAt);
	const startedMs = Date.parse(submission.startedAt);
	if (!(startedMs >= 0 && finishedMs >= 0))
		throw new Refusal('invalid', 'The attempt is malformed at startedAt.');
	// A clock that runs ahead does not put work into the future.
	const aheadMs = Math.max(0, finishedMs - now.getTime());
	const finishedAt = new Date(finishedMs - aheadMs);
	const error = medianWithInterval(result.trials.map((trial) => Math.abs(trial.errorCents)));
	const playedMs = submission.trials.reduce(
		(sum, trial) => sum + Math.min(trial.committedAtMs, LONGEST_TRIAL_MS),
		0
	);
	return {
		id: submission.id.toLowerCase(),
		studentId: actor.id,
		drill: submission.drill,
		engineVersion: submission.engineVersion,
		seed: submission.seed,
		contentHash: contentHash({ ...submission, id: submission.id.toLowerCase() }),
		stimulus: submission.stimulus,
		device: submission.device,
		trials: [...submission.trials],
		clientScore: submission.clientScore,
		serverScore: result.score,
		scoreFlagged: Math.abs(submission.clientScore - result.score) > SCORE_TOLERANCE,
		result,
		errorMedian: error.median,
		errorLow: error.low,
		errorHigh: error.high,
		toleranceCents: medianWithInterval(result.trials.map((trial) => trial.toleranceCents)).median,
		inside: result.inside,
		trialCount: result.count,
		seconds: Math.round(playedMs / 1000),
		day: finishedAt.toISOString().slice(0, 10),
		startedAt: new Date(Math.max(0, startedMs - aheadMs)),
		finishedAt,
		receivedAt: now
	};
}

/**
 * @returns false when the id was already there; waits for a transaction that is adding it. No
 * constraint is named: of two that arrive together the second may meet either unique one first.
 */
async function insertOnce(row: Row, transaction: Transaction): Promise<boolean> {
	const [rows] = await database().query(
		`INSERT INTO attempt (id, student_id, drill, engine_version, seed, content_hash, stimulus, device,
			trials, client_score, server_score, score_flagged, result, error_median, error_low,
			error_high, tolerance_cents, inside, trial_count, seconds, day, started_at, finished_at,
			received_at)
		VALUES ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12, $13, $14, $15, $16, $17, $18, $19,
			$20, $21, $22, $23, $24)
		ON CONFLICT DO NOTHING RETURNING id`,
		{
			transaction,
			bind: [
				row.id,
				row.studentId,
				row.drill,
				row.engineVersion,
				row.seed,
				row.contentHash,
				JSON.stringify(row.stimulus),
				JSON.stringify(row.device),
				JSON.stringify(row.trials),
				row.clientScore,
				row.serverScore,
				row.scoreFlagged,
				JSON.stringify(row.result),
				row.errorMedian,
				row.errorLow,
				row.errorHigh,
				row.toleranceCents,
				row.inside,
				row.trialCount,
				row.seconds,
				row.day,
				row.startedAt,
				row.finishedAt,
				row.receivedAt
			]
		}
	);
	return rows.length === 1;
}

async function repeated(actor: Actor, row: Row, transaction: Transaction): Promise<StoredAttempt> {
	const before = await Attempt.findOne({
		where: { id: row.id, studentId: actor.id },
		attributes: ['id', 'contentHash', 'serverScore', 'scoreFlagged', 'result'],
		transaction
	});
	if (!before) throw new Refusal('not-found', 'This attempt cannot be stored for your account.');
	if (before.contentHash !== row.contentHash) {
		throw new Refusal('conflict', 'Another attempt is already stored under this id.');
	}
	return { ...stored(before), created: false };
}

function stored(row: Pick<Attempt, 'id' | 'serverScore' | 'scoreFlagged' | 'result'>) {
	const { id, serverScore, scoreFlagged, result } = row;
	return { id, score: serverScore, scoreFlagged, result };
}

function differs(row: Row): Deed {
	const { clientScore, serverScore, drill } = row;
	return {
		actorId: row.studentId,
		action: 'attempt.score_differs',
		subject: { type: 'attempt', id: row.id },
		detail: { clientScore, serverScore, drill }
	};
}
