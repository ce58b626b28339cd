import {
	nextWork,
	otherWork,
	whereInOrder,
	type CourseRecords,
	type NextWork,
	type OrderState
} from '../../course';
import type { Actor } from '../auth';
import { pointsIn } from './progress';
import { ownRemarks, type RemarkView } from './remarks';
import { stringChecksIn } from './string-checks';
import { ownScope } from './visibility';

/** Attempts of each drill, and string checks, that the course looks back on. */
const LOOK_BACK = 400;

export interface Today {
	/** True until the first attempt or string check. */
	isNew: boolean;
	order: OrderState;
	next: NextWork;
	others: NextWork[];
	/** Remarks not yet put away, newest first. */
	remarks: RemarkView[];
}

/** Where the actor stands in the working order, what comes next and why, and what was said to them. */
export async function todayOf(actor: Actor, now: Date): Promise<Today> {
	const [records, remarks] = await Promise.all([
		courseRecords(actor),
		ownRemarks(actor, { unseenOnly: true, limit: 5 })
	]);
	return {
		isNew: records.attempts.length === 0 && records.stringChecks.length === 0,
		order: whereInOrder(records),
		next: nextWork(records, now.getTime()),
		others: otherWork(records, now.getTime()),
		remarks
	};
}

/** Where the actor stands in the working order, for the rule above the work. */
export async function orderOf(actor: Actor): Promise<OrderState> {
	return whereInOrder(await courseRecords(actor));
}

/** What the course needs to know of the actor's own work. */
export async function courseRecords(actor: Actor): Promise<CourseRecords> {
	const scope = ownScope(actor);
	const [points, checks] = await Promise.all([
		pointsIn(scope, LOOK_BACK),
		stringChecksIn(scope, LOOK_BACK)
	]);
	return {
		attempts: points.map((point) => ({
			drill: point.drill,
			finishedAtMs: Date.parse(point.finishedAt),
			medianAbsErrorCents: point.errorCents,
			inside: point.inside,
			count: point.count
		})),
		stringChecks: checks.map((check) => ({
			kind: check.kind,
			checkedAtMs: Date.parse(check.checkedAt)
		}))
	};
}
