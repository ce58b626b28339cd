export { dayOf, isSteady } from './mastery';
export { nextWork, otherWork } from './next-work';
export type { AttemptRecord, CourseRecords, StringCheckRecord } from './records';
export {
	isDone,
	PARTS,
	STEPS,
	whereInOrder,
	type NextWork,
	type OrderState,
	type PartId,
	type PartState,
	type Step,
	type StepId,
	type StepState
} from './working-order';
