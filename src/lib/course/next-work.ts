import { TOLERANCE_SETS } from '../acoustics/tolerances';
import type { ScoredDrillId } from '../drills/types';
import { dayOf } from './mastery';
import type { AttemptRecord, CourseRecords } from './records';
import { isDone, whereInOrder, type NextWork, type PartId, type StepId } from './working-order';

const HOUR_MS = 3_600_000;
const DAY_MS = 24 * HOUR_MS;
/** A drill comes no more than this often in one day. */
const BLOCKS_A_DAY = 2;
/** After this many blocks within an hour the ear rests. */
const BLOCKS_AN_HOUR = 4;
/** What is held comes back after this long, to find out whether it stayed. */
const DUE_AFTER_MS = 7 * DAY_MS;
/** The interval drill opens once a unison block had this share of its trials inside. */
const OPENING_SHARE = 0.5;

interface Skill {
	drill: ScoredDrillId;
	stepId: StepId;
}

const BLOCK_MINUTES = 8;

/**
 * The next piece of work, with the reason. What is held and unseen for a week comes first; then the
 * first open exercise in working order, unless it was done today and another one is open (mixing
 * teaches better than blocking: Wong et al. 2021); no drill more than twice a day; a rest after four
 * blocks within an hour. When nothing is due, a real string.
 */
export function nextWork(records: CourseRecords, nowMs: number, utcOffsetMinutes = 0): NextWork {
	const recent = records.attempts.filter(({ finishedAtMs }) => nowMs - finishedAtMs < HOUR_MS);
	const place = whereInOrder(records);
	if (recent.length >= BLOCKS_AN_HOUR) {
		return rest(
			place,
			'Rest your ears',
			'Four blocks in an hour are enough: an ear learns in short stretches.'
		);
	}
	const today = (drill: ScoredDrillId) => blocksToday(records, drill, nowMs, utcOffsetMinutes);
	const due = skillsInOrder(records).find(
		(skill) => today(skill.drill) === 0 && isDue(records, skill, nowMs)
	);
	if (due) return drillWork(due, dueReason(records, due, nowMs));
	const open = openSkills(records).filter((skill) => today(skill.drill) < BLOCKS_A_DAY);
	const fresh = open.find((skill) => today(skill.drill) === 0);
	const skill = fresh ?? open[0];
	if (skill) return drillWork(skill, openReason(records, skill, open[0] !== skill));
	return (
		checkWork(records, nowMs) ??
		rest(
			place,
			'Enough for today',
			'You have had what is due; the rest of the learning happens overnight.'
		)
	);
}

/** What else could be done now, for "or instead": the other open drills and a real string. */
export function otherWork(records: CourseRecords, nowMs: number, utcOffsetMinutes = 0): NextWork[] {
	const next = nextWork(records, nowMs, utcOffsetMinutes);
	const drills = skillsInOrder(records)
		.filter((skill) => skill.drill !== next.drill)
		.map((skill) => drillWork(skill, openReason(records, skill, false)));
	const check = next.kind === 'string-check' ? [] : [stringCheck(records)];
	return [...drills, ...check];
}

/** The two drills, each at the step where the work needs it. */
function skillsInOrder(records: CourseRecords): Skill[] {
	const unisonStep: StepId =
		isDone(records, 'fork', 'do') && isDone(records, 'temperament', 'do') ? 'unisons' : 'fork';
	return [
		{ drill: 'unison', stepId: unisonStep },
		{ drill: 'interval', stepId: 'temperament' }
	];
}

function openSkills(records: CourseRecords): Skill[] {
	return skillsInOrder(records)
		.filter(({ stepId }) => !isDone(records, stepId, 'do'))
		.filter(({ drill }) => drill === 'unison' || intervalIsOpen(records));
}

function intervalIsOpen(records: CourseRecords): boolean {
	return of(records, 'unison').some(({ inside, count }) => inside >= OPENING_SHARE * count);
}

function isDue(records: CourseRecords, { drill, stepId }: Skill, nowMs: number): boolean {
	const last = lastOf(records, drill);
	if (!last || nowMs - last.finishedAtMs < DUE_AFTER_MS) return false;
	return isDone(records, stepId, 'do') || (stepId === 'unisons' && isDone(records, 'fork', 'do'));
}

function dueReason(records: CourseRecords, { drill }: Skill, nowMs: number): string {
	const last = lastOf(records, drill);
	const days = last ? Math.floor((nowMs - last.finishedAtMs) / DAY_MS) : 0;
	return `You held ${plural(drill)}; after ${days} days it is time to find out whether they stayed.`;
}

function openReason(records: CourseRecords, { drill, stepId }: Skill, mixed: boolean): string {
	const last = lastOf(records, drill);
	if (!last && drill === 'unison') {
		return 'Setting A4 to the fork is a unison, so the first work of the hand is to bring two strings together.';
	}
	if (!last) {
		return intervalIsOpen(records)
			? 'Your unisons are good enough to start on the temperament: an interval left beating at the right rate.'
			: 'For later, or for a taste: the temperament leaves each interval beating at its own rate.';
	}
	const score = `Last time ${last.inside} of ${last.count} were inside`;
	if (mixed)
		return `${score}; taking turns between drills teaches more than one drill over and over.`;
	if (stepId === 'unisons')
		return `${score}; at the unisons the bar is a working tuner’s, ${TOLERANCE_SETS.working.unison} cents.`;
	return `${score}; it is behind you once eight of ten are, on two days.`;
}

function drillWork({ drill, stepId }: Skill, reason: string): NextWork {
	return {
		stepId,
		partId: 'do',
		kind: 'drill',
		drill,
		href: `/practice/${drill}`,
		title:
			drill === 'unison' ? 'Bring two strings together' : 'Leave an interval beating at its rate',
		reason,
		minutes: BLOCK_MINUTES
	};
}

/** A real string, when there was none for a week. */
function checkWork(records: CourseRecords, nowMs: number): NextWork | null {
	const last = Math.max(0, ...records.stringChecks.map(({ checkedAtMs }) => checkedAtMs));
	return nowMs - last < DUE_AFTER_MS ? null : stringCheck(records);
}

function stringCheck(records: CourseRecords): NextWork {
	const interval = isDone(records, 'temperament', 'do') || isDone(records, 'fork', 'real');
	const kind = interval ? 'interval' : 'unison';
	return {
		stepId: interval ? 'temperament' : 'fork',
		partId: 'real',
		kind: 'string-check',
		drill: null,
		href: `/string-check?kind=${kind}`,
		title: interval ? 'Check an interval on a real piano' : 'Check a unison on a real piano',
		reason:
			'What the hand learns here must hold on a real string: a microphone tells what yours does.',
		minutes: 5
	};
}

function rest(place: { stepId: StepId; partId: PartId }, title: string, reason: string): NextWork {
	return {
		stepId: place.stepId,
		partId: place.partId,
		kind: 'rest',
		drill: null,
		href: '/progress',
		title,
		reason,
		minutes: 0
	};
}

function blocksToday(
	records: CourseRecords,
	drill: ScoredDrillId,
	nowMs: number,
	utcOffsetMinutes: number
): number {
	const day = dayOf(nowMs, utcOffsetMinutes);
	return of(records, drill).filter((a) => dayOf(a.finishedAtMs, utcOffsetMinutes) === day).length;
}

function of(records: CourseRecords, drill: ScoredDrillId): AttemptRecord[] {
	return records.attempts.filter((attempt) => attempt.drill === drill);
}

function lastOf(records: CourseRecords, drill: ScoredDrillId): AttemptRecord | null {
	const attempts = of(records, drill);
	if (attempts.length === 0) return null;
	return attempts.reduce((late, next) => (next.finishedAtMs > late.finishedAtMs ? next : late));
}

function plural(drill: ScoredDrillId): string {
	return drill === 'unison' ? 'unisons' : 'intervals';
}
