import type { Transaction } from 'sequelize';
import { database } from '../database';

/**
 * Brings `attempt_daily` up to date for one student, drill and day, inside the transaction that adds
 * an attempt there. The row is locked first, so that of two transactions the second one counts after
 * the first has committed: the rollup equals its attempts whatever the order and however many at once.
 * It is recomputed, not incremented, so it also mends itself.
 */
export async function refreshDay(
	key: { studentId: string; drill: string; day: string },
	transaction: Transaction
): Promise<void> {
	const bind = [key.studentId, key.drill, key.day];
	await database().query(
		`INSERT INTO attempt_daily AS d (student_id, drill, day) VALUES ($1, $2, $3)
		ON CONFLICT (student_id, drill, day) DO UPDATE SET attempts = d.attempts`,
		{ bind, transaction }
	);
	// A statement of its own: its snapshot is taken after the lock was granted.
	await database().query(
		`UPDATE attempt_daily d
		SET attempts = s.attempts, seconds = s.seconds, median_error = s.median_error
		FROM (
			SELECT count(*)::int AS attempts, COALESCE(sum(seconds), 0)::int AS seconds,
				percentile_cont(0.5) WITHIN GROUP (ORDER BY error_median) AS median_error
			FROM attempt WHERE student_id = $1 AND drill = $2 AND day = $3
		) s
		WHERE d.student_id = $1 AND d.drill = $2 AND d.day = $3`,
		{ bind, transaction }
	);
}
