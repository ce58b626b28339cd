import type { ScoredDrillId } from '../../drills/types';
import type { MeasureResult } from '../../measurement/types';

/** What the last weeks of a drill say. */
export type Trend = 'there' | 'closing-in' | 'level' | 'further-off' | 'too-few';

export interface Point {
	attemptId: string;
	/** ISO 8601, UTC. */
	finishedAt: string;
	/** Median |error| in cents with its 95 % interval. */
	errorCents: number;
	errorLowCents: number;
	errorHighCents: number;
	/** What its trials were judged by, cents. */
	toleranceCents: number;
	inside: number;
	count: number;
}

export interface DrillProgress {
	drill: ScoredDrillId;
	/** Oldest first. */
	points: Point[];
	days: { day: string; attempts: number; seconds: number; medianErrorCents: number }[];
	toleranceCents: number | null;
	verdict: 'inside' | 'near' | 'outside' | null;
	trend: Trend;
}

export interface StringCheck {
	id: string;
	kind: 'note' | 'unison' | 'interval';
	notes: string[];
	source: 'microphone' | 'file';
	result: MeasureResult;
	/** ISO 8601, UTC. */
	checkedAt: string;
}
