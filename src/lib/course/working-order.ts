/**
 * The order in which a piano is tuned, and where a student stands in it. Pure: records and the time
 * are passed in.
 */
import type { ScoredDrillId } from '../drills/types';

export type StepId =
	'ready' | 'mute-strip' | 'fork' | 'temperament' | 'octaves' | 'unisons' | 'final';
export type PartId = 'know' | 'hear' | 'do' | 'real';
export const PARTS: readonly PartId[] = ['know', 'hear', 'do', 'real'];

export interface Step {
	readonly id: StepId;
	/** 1 to 7. */
	readonly number: number;
	readonly name: string;
	readonly parts: readonly PartId[];
}

/** The working order (common practice, no source). */
export const STEPS: readonly Step[] = [
	{ id: 'ready', number: 1, name: 'Ready', parts: PARTS },
	{ id: 'mute-strip', number: 2, name: 'Mute strip', parts: PARTS },
	{ id: 'fork', number: 3, name: 'A4 to the fork', parts: PARTS },
	{ id: 'temperament', number: 4, name: 'Temperament octave', parts: PARTS },
	{ id: 'octaves', number: 5, name: 'Octaves outward', parts: PARTS },
	{ id: 'unisons', number: 6, name: 'Unisons', parts: PARTS },
	{ id: 'final', number: 7, name: 'Final check', parts: PARTS }
];

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

/** done: behind you; here: the next piece of work; to-come: not reached or not recorded. */
export type PartState = 'done' | 'here' | 'to-come';

export interface StepState extends Step {
	readonly states: Readonly<Record<PartId, PartState>>;
	readonly here: boolean;
}

export interface OrderState {
	readonly stepId: StepId;
	readonly partId: PartId;
	readonly steps: readonly StepState[];
}

export interface NextWork {
	readonly stepId: StepId;
	readonly partId: PartId;
	readonly kind: 'drill' | 'string-check' | 'rest';
	readonly drill: ScoredDrillId | null;
	/** Where the work is done, a path of the application. */
	readonly href: string;
	/** What to do, as a heading. */
	readonly title: string;
	/** Why this and why now, one sentence. */
	readonly reason: string;
	/** About how long it takes. */
	readonly minutes: number;
}
