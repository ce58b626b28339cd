import { describe, expect, it } from 'vitest';
import { dayOf, isSteady } from './mastery';
import { nextWork, otherWork } from './next-work';
import type { AttemptRecord, CourseRecords } from './records';
import { STEPS, whereInOrder } from './working-order';

const DAY = 86_400_000;
const NOON = Date.UTC(2026, 2, 10, 12);

function block(
	drill: AttemptRecord['drill'],
	daysAgo: number,
	inside: number,
	medianAbsErrorCents = 0.8
): AttemptRecord {
	return { drill, finishedAtMs: NOON - daysAgo * DAY, inside, count: 10, medianAbsErrorCents };
}
const records = (
	attempts: AttemptRecord[],
	stringChecks: CourseRecords['stringChecks'] = []
): CourseRecords => ({ attempts, stringChecks });

describe('working order', () => {
	it('has seven steps of four parts, numbered', () => {
		expect(STEPS.map((step) => step.number)).toEqual([1, 2, 3, 4, 5, 6, 7]);
		expect(STEPS.every((step) => step.parts.length === 4)).toBe(true);
	});

	it('begins with the unison of A4 and the fork', () => {
		const state = whereInOrder(records([]));
		expect(state).toMatchObject({ stepId: 'fork', partId: 'do' });
		const parts = state.steps.flatMap((step) => Object.values(step.states));
		expect(parts.filter((part) => part === 'here')).toHaveLength(1);
		expect(parts.filter((part) => part === 'done')).toHaveLength(0);
	});

	it('moves on when unisons are held on two days, and marks what is done', () => {
		const held = [block('unison', 3, 8), block('unison', 1, 9)];
		const state = whereInOrder(records(held));
		expect(state).toMatchObject({ stepId: 'temperament', partId: 'do' });
		expect(state.steps[2].states).toEqual({
			know: 'to-come',
			hear: 'to-come',
			do: 'done',
			real: 'to-come'
		});
	});

	it('asks a working tuner’s median at the unisons', () => {
		const learner = ['unison', 'interval'].flatMap((drill) =>
			[4, 2].map((ago) => block(drill as 'unison', ago, 9, 0.8))
		);
		expect(whereInOrder(records(learner)).stepId).toBe('unisons');
		const working = [...learner, block('unison', 1, 9, 0.5), block('unison', 0, 9, 0.6)];
		expect(whereInOrder(records(working))).toMatchObject({ stepId: 'fork', partId: 'real' });
		const checks = ['unison', 'interval'].map((kind) => ({
			kind: kind as 'unison',
			checkedAtMs: NOON
		}));
		expect(whereInOrder(records(working, checks)).stepId).toBe('final');
	});

	it('never calls a drill held after one day or with seven of ten', () => {
		expect(isSteady(records([block('unison', 1, 10), block('unison', 1.01, 10)]), 'unison')).toBe(
			false
		);
		expect(isSteady(records([block('unison', 3, 7), block('unison', 1, 7)]), 'unison')).toBe(false);
	});

	it('counts days in the zone of the student', () => {
		const late = Date.UTC(2026, 2, 10, 23, 30);
		expect(dayOf(late, 60)).toBe(dayOf(late) + 1);
	});
});

describe('next work', () => {
	it('starts with unisons and says why', () => {
		const work = nextWork(records([]), NOON);
		expect(work).toMatchObject({ drill: 'unison', href: '/practice/unison', stepId: 'fork' });
		expect(work.reason).toContain('A4 to the fork');
	});

	it('takes turns once the interval drill is open', () => {
		const work = nextWork(records([block('unison', 0.1, 6)]), NOON);
		expect(work.drill).toBe('interval');
		const still = nextWork(records([block('unison', 0.1, 3)]), NOON);
		expect(still.drill).toBe('unison');
	});

	it('gives no drill more than twice a day, then a real string, then rest', () => {
		const twice = [0.2, 0.3].flatMap((ago) => [block('unison', ago, 6), block('interval', ago, 3)]);
		expect(nextWork(records(twice), NOON).kind).toBe('string-check');
		const checked = [{ kind: 'unison' as const, checkedAtMs: NOON - DAY }];
		expect(nextWork(records(twice, checked), NOON).kind).toBe('rest');
	});

	it('rests after four blocks in an hour', () => {
		const four = [0.01, 0.015, 0.02, 0.025].map((ago) => block('unison', ago, 3));
		expect(nextWork(records(four), NOON)).toMatchObject({ kind: 'rest', drill: null });
	});

	it('brings back what was held after a week', () => {
		const attempts = [block('unison', 12, 9), block('unison', 9, 9), block('interval', 1, 4)];
		const work = nextWork(records(attempts), NOON);
		expect(work.drill).toBe('unison');
		expect(work.reason).toContain('after 9 days');
	});

	it('offers other work without repeating the next', () => {
		const next = nextWork(records([]), NOON);
		const others = otherWork(records([]), NOON);
		expect(others.map(({ href }) => href)).not.toContain(next.href);
		expect(others.length).toBeGreaterThan(0);
		expect([next, ...others].every(({ reason }) => reason.endsWith('.'))).toBe(true);
	});

	it('does not depend on the order of the records', () => {
		const attempts = [block('unison', 5, 9), block('interval', 2, 4), block('unison', 0.2, 8)];
		expect(nextWork(records([...attempts].reverse()), NOON)).toEqual(
			nextWork(records(attempts), NOON)
		);
	});
});
