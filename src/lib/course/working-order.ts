/**
 * The order in which a piano is tuned, and where a student stands in it. Pure: records and the time
 * are passed in.
 */
import type { ScoredDrillId } from '../drills/types';
import { TOLERANCE_SETS } from '../acoustics/tolerances';
import { isSteady } from './mastery';
import type { CourseRecords } from './records';

export type { AttemptRecord, CourseRecords, StringCheckRecord } from './records';

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

/** Parts that have work behind them here, in the order in which they come. */
const WORK_PARTS: readonly { stepId: StepId; partId: PartId }[] = [
	{ stepId: 'fork', partId: 'do' },
	{ stepId: 'fork', partId: 'real' },
	{ stepId: 'temperament', partId: 'do' },
	{ stepId: 'temperament', partId: 'real' },
	{ stepId: 'unisons', partId: 'do' }
];

/**
 * Where a student stands: what is done, and the first piece of work that is not. A part without a
 * record is to come, also when it lies before the place where the student is: nothing is called done
 * that nobody saw. A real string never blocks the way on: whoever has no piano goes on with the drills.
 */
export function whereInOrder(records: CourseRecords): OrderState {
	const here = placeOf(records);
	const steps = STEPS.map((step): StepState => {
		const states = Object.fromEntries(
			step.parts.map((partId) => [partId, stateOf(records, step.id, partId, here)])
		) as Record<PartId, PartState>;
		return { ...step, states, here: step.id === here.stepId };
	});
	return { ...here, steps };
}

function stateOf(
	records: CourseRecords,
	stepId: StepId,
	partId: PartId,
	here: { stepId: StepId; partId: PartId }
): PartState {
	if (here.stepId === stepId && here.partId === partId) return 'here';
	return isDone(records, stepId, partId) ? 'done' : 'to-come';
}

function placeOf(records: CourseRecords): { stepId: StepId; partId: PartId } {
	const open = WORK_PARTS.filter(({ stepId, partId }) => !isDone(records, stepId, partId));
	// The first exercise of the hand that is still open; when none is, the first real string.
	return open.find(({ partId }) => partId === 'do') ?? open[0] ?? { stepId: 'final', partId: 'do' };
}

/** The median error of a working tuner's unisons, cents. */
const WORKING_UNISON_CENTS = TOLERANCE_SETS.working.unison;

/** Whether the records show that a part is behind the student. */
export function isDone(records: CourseRecords, stepId: StepId, partId: PartId): boolean {
	const key = `${stepId}.${partId}`;
	if (key === 'fork.do') return isSteady(records, 'unison');
	if (key === 'temperament.do') return isSteady(records, 'interval');
	if (key === 'unisons.do') return isSteady(records, 'unison', WORKING_UNISON_CENTS);
	if (key === 'fork.real') return records.stringChecks.some(({ kind }) => kind === 'unison');
	if (key === 'temperament.real') {
		return records.stringChecks.some(({ kind }) => kind === 'interval');
	}
	return false;
}
