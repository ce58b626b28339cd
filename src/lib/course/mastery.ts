import type { ScoredDrillId } from '../drills/types';
import type { AttemptRecord, CourseRecords } from './records';

const DAY_MS = 86_400_000;
/** Trials of ten that must be inside. */
const STEADY_SHARE = 0.8;
/** Different days on which that must happen. */
const STEADY_DAYS = 2;

/** The day of a moment, whole days since 1970, in the student's zone. */
export function dayOf(timeMs: number, utcOffsetMinutes = 0): number {
	return Math.floor((timeMs + utcOffsetMinutes * 60_000) / DAY_MS);
}

/**
 * Whether a drill is held: on two different days a block with at least eight of ten trials inside
 * its tolerance, and, where a limit is given, a median error within it.
 *
 * Eight of ten twice is a strict rule on purpose. Someone whose median error is exactly the
 * tolerance is inside in half of the trials and passes one block in 18 (binomial, 56/1024); a
 * "median below the limit, twice" rule would pass that person every second day.
 */
export function isSteady(
	records: CourseRecords,
	drill: ScoredDrillId,
	limitCents = Number.POSITIVE_INFINITY
): boolean {
	const days = new Set(
		records.attempts
			.filter((attempt) => attempt.drill === drill && isHeld(attempt, limitCents))
			.map((attempt) => dayOf(attempt.finishedAtMs))
	);
	return days.size >= STEADY_DAYS;
}

function isHeld(attempt: AttemptRecord, limitCents: number): boolean {
	return (
		attempt.count > 0 &&
		attempt.inside >= STEADY_SHARE * attempt.count &&
		attempt.medianAbsErrorCents <= limitCents
	);
}
