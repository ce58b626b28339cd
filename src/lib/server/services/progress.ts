import { QueryTypes } from 'sequelize';
import type { ScoredDrillId } from '../../drills/types';
import type { Actor } from '../auth';
import { database } from '../database';
import { Refusal } from '../refusal';
import { remarksIn, type RemarkView } from './remarks';
import { stringChecksIn, type StringCheckView } from './string-checks';
import { TREND_DAYS, trendOf, verdictOf, type Trend } from './trend';
import { classStudentScope, ownScope, type Scope } from './visibility';

/** Attempts drawn in one curve, newest kept. */
const POINTS = 200;
/** Days drawn in one curve, newest kept. */
const DAYS = 200;
const CHECKS = 20;
const DRILLS: readonly ScoredDrillId[] = ['unison', 'interval'];

/** One attempt in a curve. */
export interface ProgressPoint {
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

/** One day of practice at a drill. */
export interface ProgressDay {
	/** `YYYY-MM-DD`, UTC. */
	day: string;
	attempts: number;
	seconds: number;
	/** Median of the day's attempts, cents. */
	medianErrorCents: number;
}

export interface DrillProgress {
	drill: ScoredDrillId;
	/** Oldest first. */
	points: ProgressPoint[];
	days: ProgressDay[];
	/** The tolerance of the latest attempt, cents; null before the first. */
	toleranceCents: number | null;
	/** Where the latest attempt's interval lies against it; null before the first. */
	verdict: 'inside' | 'near' | 'outside' | null;
	/** What the last four weeks of practice say. */
	trend: Trend;
}

export interface Progress {
	drills: DrillProgress[];
	stringChecks: StringCheckView[];
	remarks: RemarkView[];
}

/** The actor's own curves, string checks and remarks. */
export function ownProgress(actor: Actor): Promise<Progress> {
	return progressIn(ownScope(actor));
}

export interface StudentProgress extends Progress {
	student: { id: string; name: string };
	class: { id: string; name: string };
	/** First day, UTC, whose records the class sees. */
	since: string;
}

/**
 * The same of a present student in a class where the actor teaches, from the day of joining it.
 * @throws Refusal 'not-found' for anybody else.
 */
export async function studentProgress(
	actor: Actor,
	classId: string,
	studentId: string
): Promise<StudentProgress> {
	const scope = classStudentScope(actor, classId, studentId);
	const [row] = await database().query<{ name: string; className: string; since: string }>(
		`WITH ${scope.cte}
		SELECT u.name, c.name AS "className", to_char(v.since, 'YYYY-MM-DD') AS since
		FROM visible v
		JOIN "user" u ON u.id = v.student_id
		JOIN class c ON c.id = :classId`,
		{ type: QueryTypes.SELECT, replacements: scope.values }
	);
	if (!row) throw new Refusal('not-found', 'There is no such student in this class.');
	return {
		student: { id: studentId, name: row.name },
		class: { id: classId, name: row.className },
		since: row.since,
		...(await progressIn(scope))
	};
}

async function progressIn(scope: Scope): Promise<Progress> {
	const [points, days, stringChecks, remarks] = await Promise.all([
		pointsIn(scope, POINTS),
		daysIn(scope),
		stringChecksIn(scope, CHECKS),
		remarksIn(scope)
	]);
	const drills = DRILLS.map((drill) =>
		drillProgress(
			drill,
			points.filter((point) => point.drill === drill).map(({ drill: _drill, ...point }) => point),
			days.filter((day) => day.drill === drill).map(({ drill: _drill, ...day }) => day)
		)
	);
	return { drills, stringChecks, remarks };
}

function drillProgress(
	drill: ScoredDrillId,
	points: ProgressPoint[],
	days: ProgressDay[]
): DrillProgress {
	const last = points.at(-1);
	const recent = recentDays(days).map((day) => day.medianErrorCents);
	return {
		drill,
		points,
		days,
		toleranceCents: last?.toleranceCents ?? null,
		verdict: last ? verdictOf(last.errorLowCents, last.errorHighCents, last.toleranceCents) : null,
		trend: last ? trendOf(recent, last.toleranceCents) : 'too-few'
	};
}

/** The days of practice within four weeks of the latest one. */
function recentDays(days: readonly ProgressDay[]): ProgressDay[] {
	const latest = Date.parse(days.at(-1)?.day ?? '1970-01-01');
	return days.filter(({ day }) => latest - Date.parse(day) < TREND_DAYS * 86_400_000);
}

/** The newest attempts of each drill that a scope of one student reaches, oldest first. */
export async function pointsIn(
	scope: Scope,
	limit: number
): Promise<(ProgressPoint & { drill: ScoredDrillId })[]> {
	type Row = Omit<ProgressPoint, 'finishedAt'> & { drill: ScoredDrillId; finishedAt: Date };
	const rows = await database().query<Row>(
		`WITH ${scope.cte}
		SELECT a.id AS "attemptId", a.drill, a.finished_at AS "finishedAt",
			a.error_median AS "errorCents", a.error_low AS "errorLowCents",
			a.error_high AS "errorHighCents", a.tolerance_cents AS "toleranceCents", a.inside,
			a.trial_count AS count
		FROM visible v
		CROSS JOIN unnest(ARRAY[:drills]) AS d (drill)
		CROSS JOIN LATERAL (
			SELECT id, drill, finished_at, error_median, error_low, error_high, tolerance_cents, inside,
				trial_count
			FROM attempt
			WHERE student_id = v.student_id AND drill = d.drill AND day >= v.since
			ORDER BY finished_at DESC, id DESC LIMIT :limit
		) a
		ORDER BY a.finished_at, a.id`,
		{ type: QueryTypes.SELECT, replacements: { ...scope.values, drills: DRILLS, limit } }
	);
	return rows.map((row) => ({ ...row, finishedAt: row.finishedAt.toISOString() }));
}

async function daysIn(scope: Scope): Promise<(ProgressDay & { drill: ScoredDrillId })[]> {
	return database().query<ProgressDay & { drill: ScoredDrillId }>(
		`WITH ${scope.cte}
		SELECT d.drill, to_char(d.day, 'YYYY-MM-DD') AS day, d.attempts, d.seconds,
			d.median_error AS "medianErrorCents"
		FROM visible v
		CROSS JOIN unnest(ARRAY[:drills]) AS n (drill)
		CROSS JOIN LATERAL (
			SELECT drill, day, attempts, seconds, median_error
			FROM attempt_daily
			WHERE student_id = v.student_id AND drill = n.drill AND day >= v.since
				AND median_error IS NOT NULL
			ORDER BY day DESC LIMIT ${DAYS}
		) d
		ORDER BY d.day`,
		{ type: QueryTypes.SELECT, replacements: { ...scope.values, drills: DRILLS } }
	);
}
