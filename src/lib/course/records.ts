import type { ScoredDrillId } from '../drills/types';

export interface AttemptRecord {
	readonly drill: ScoredDrillId;
	/** Milliseconds since 1970. */
	readonly finishedAtMs: number;
	readonly medianAbsErrorCents: number;
	readonly inside: number;
	readonly count: number;
}

export interface StringCheckRecord {
	readonly kind: 'note' | 'unison' | 'interval';
	readonly checkedAtMs: number;
}

/** What is known of one student, in any order. */
export interface CourseRecords {
	readonly attempts: readonly AttemptRecord[];
	readonly stringChecks: readonly StringCheckRecord[];
}
