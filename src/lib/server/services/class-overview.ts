import { QueryTypes } from 'sequelize';
import type { ScoredDrillId } from '../../drills/types';
import type { Actor } from '../auth';
import { database } from '../database';
import { Refusal } from '../refusal';
import { TREND_DAYS, trendOf, verdictOf, type Trend } from './trend';
import { classScope, type Scope } from './visibility';

const DRILLS: readonly ScoredDrillId[] = ['unison', 'interval'];

/** Where a student stands at one drill. */
export interface DrillStanding {
	drill: ScoredDrillId;
	/** Median |error| of the latest attempt in cents, its 95 % interval, and what it was judged by. */
	errorCents: number;
	errorLowCents: number;
	errorHighCents: number;
	toleranceCents: number;
	verdict: 'inside' | 'near' | 'outside';
	latestAttemptId: string;
	/** Daily medians of the last four weeks, oldest first, cents. */
	dailyMedians: number[];
	trend: Trend;
}

export interface StudentRow {
	id: string;
	name: string;
	attempts: number;
	seconds: number;
	secondsThisWeek: number;
	/** `YYYY-MM-DD`, UTC; null before the first attempt. */
	lastPractice: string | null;
	/** Whole days since then; null before the first attempt. */
	daysAway: number | null;
	drills: Record<ScoredDrillId, DrillStanding | null>;
	lastStringCheck: { kind: 'note' | 'unison' | 'interval'; notes: string[]; day: string } | null;
}

export interface ClassOverview {
	class: {
		id: string;
		name: string;
		/** `YYYY-MM-DD`. */
		startsOn: string | null;
		endsOn: string | null;
	};
	students: StudentRow[];
}

/**
 * The present students of a class in which the actor teaches, with what each has done since joining.
 * @throws Refusal 'not-found' for any other class.
 */
export async function classOverview(
	actor: Actor,
	classId: string,
	now: Date
): Promise<ClassOverview> {
	const scope = classScope(actor, classId);
	const today = now.toISOString().slice(0, 10);
	const [header, students, latest, trends] = await Promise.all([
		headerOf(scope),
		studentsIn(scope, today),
		latestIn(scope),
		trendsIn(scope, today)
	]);
	return {
		class: header,
		students: students.map((student) => ({
			...student,
			daysAway: student.lastPractice === null ? null : daysBetween(student.lastPractice, today),
			drills: {
				unison: standing('unison', student.id, latest, trends),
				interval: standing('interval', student.id, latest, trends)
			}
		}))
	};
}

function daysBetween(earlier: string, later: string): number {
	return Math.max(0, Math.round((Date.parse(later) - Date.parse(earlier)) / 86_400_000));
}

async function headerOf(scope: Scope): Promise<ClassOverview['class']> {
	const [row] = await database().query<ClassOverview['class']>(
		`SELECT c.id, c.name, to_char(c.starts_on, 'YYYY-MM-DD') AS "startsOn",
			to_char(c.ends_on, 'YYYY-MM-DD') AS "endsOn"
		FROM class c
		JOIN membership i ON i.class_id = c.id AND i.user_id = :actorId AND i.role = 'instructor'
			AND i.left_at IS NULL
		WHERE c.id = :classId`,
		{ type: QueryTypes.SELECT, replacements: scope.values }
	);
	if (!row) throw new Refusal('not-found', 'There is no such class.');
	return row;
}

type PlainRow = Omit<StudentRow, 'drills' | 'daysAway'>;

async function studentsIn(scope: Scope, today: string): Promise<PlainRow[]> {
	return database().query<PlainRow>(
		`WITH ${scope.cte}
		SELECT u.id, u.name, COALESCE(d.attempts, 0)::int AS attempts,
			COALESCE(d.seconds, 0)::int AS seconds,
			COALESCE(d.week, 0)::int AS "secondsThisWeek",
			to_char(d.last, 'YYYY-MM-DD') AS "lastPractice", s.last AS "lastStringCheck"
		FROM visible v
		JOIN "user" u ON u.id = v.student_id
		LEFT JOIN LATERAL (
			SELECT sum(attempts) AS attempts, sum(seconds) AS seconds, max(day) AS last,
				sum(seconds) FILTER (WHERE day > CAST(:today AS date) - 7) AS week
			FROM attempt_daily WHERE student_id = v.student_id AND day >= v.since AND attempts > 0
		) d ON true
		LEFT JOIN LATERAL (
			SELECT json_build_object('kind', kind, 'notes', notes,
				'day', to_char(checked_at AT TIME ZONE 'UTC', 'YYYY-MM-DD')) AS last
			FROM string_check WHERE student_id = v.student_id AND checked_at >= v.since
			ORDER BY checked_at DESC, id DESC LIMIT 1
		) s ON true
		ORDER BY u.name, u.id`,
		{ type: QueryTypes.SELECT, replacements: { ...scope.values, today } }
	);
}

type Latest = Omit<DrillStanding, 'verdict' | 'dailyMedians' | 'trend'> & { studentId: string };

async function latestIn(scope: Scope): Promise<Latest[]> {
	return database().query<Latest>(
		`WITH ${scope.cte}
		SELECT v.student_id AS "studentId", a.*
		FROM visible v
		CROSS JOIN unnest(ARRAY[:drills]) AS d (drill)
		CROSS JOIN LATERAL (
			SELECT drill, id AS "latestAttemptId", error_median AS "errorCents",
				error_low AS "errorLowCents", error_high AS "errorHighCents",
				tolerance_cents AS "toleranceCents"
			FROM attempt
			WHERE student_id = v.student_id AND drill = d.drill AND day >= v.since
			ORDER BY finished_at DESC, id DESC LIMIT 1
		) a`,
		{ type: QueryTypes.SELECT, replacements: { ...scope.values, drills: DRILLS } }
	);
}

type TrendRow = { studentId: string; drill: ScoredDrillId; medians: number[] };

async function trendsIn(scope: Scope, today: string): Promise<TrendRow[]> {
	return database().query<TrendRow>(
		`WITH ${scope.cte}
		SELECT v.student_id AS "studentId", d.drill, array_agg(d.median_error ORDER BY d.day) AS medians
		FROM visible v
		JOIN attempt_daily d ON d.student_id = v.student_id AND d.drill IN (:drills)
			AND d.day >= GREATEST(v.since, CAST(:today AS date) - ${TREND_DAYS - 1})
			AND d.median_error IS NOT NULL
		GROUP BY v.student_id, d.drill`,
		{ type: QueryTypes.SELECT, replacements: { ...scope.values, drills: DRILLS, today } }
	);
}

function standing(
	drill: ScoredDrillId,
	studentId: string,
	latest: readonly Latest[],
	trends: readonly TrendRow[]
): DrillStanding | null {
	const last = latest.find((row) => row.studentId === studentId && row.drill === drill);
	if (!last) return null;
	const { studentId: _studentId, ...rest } = last;
	const dailyMedians =
		trends.find((row) => row.studentId === studentId && row.drill === drill)?.medians ?? [];
	return {
		...rest,
		verdict: verdictOf(last.errorLowCents, last.errorHighCents, last.toleranceCents),
		dailyMedians,
		trend: trendOf(dailyMedians, last.toleranceCents)
	};
}
