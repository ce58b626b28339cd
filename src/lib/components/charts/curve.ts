/** What the curve of a drill shows, made ready for drawing and for its table. Pure. */

export interface CurvePoint {
	/** Milliseconds since 1970 (UTC), or an ISO 8601 date-time. */
	readonly at: number | string;
	/** Error left, in the curve's unit. */
	readonly value: number;
}

export interface DailyMedian {
	/** Calendar day, YYYY-MM-DD. */
	readonly day: string;
	readonly value: number;
}

export interface CurveDay {
	readonly day: string;
	readonly values: readonly number[];
	readonly median: number | null;
}

export const atMs = (at: number | string): number => (typeof at === 'number' ? at : Date.parse(at));

/** Calendar day (UTC) of a time in milliseconds, YYYY-MM-DD. */
export const dayOf = (ms: number): string => new Date(ms).toISOString().slice(0, 10);

/** Noon (UTC) of a calendar day in milliseconds: where the day's median stands. */
export const noonOf = (day: string): number => Date.parse(`${day}T12:00:00Z`);

/** Middle of the values; null for none. */
export function medianOf(values: readonly number[]): number | null {
	if (values.length === 0) return null;
	const sorted = [...values].sort((a, b) => a - b);
	const middle = sorted.length >> 1;
	return sorted.length % 2 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2;
}

/**
 * One row a day, latest first: every value and the median. Medians that are given win (the server
 * keeps them); a day without one gets the median of its points.
 */
export function daysOf(points: readonly CurvePoint[], medians: readonly DailyMedian[]): CurveDay[] {
	const byDay = new Map<string, number[]>();
	for (const point of points) {
		const ms = atMs(point.at);
		if (!Number.isFinite(ms)) continue;
		const day = dayOf(ms);
		byDay.set(day, [...(byDay.get(day) ?? []), point.value]);
	}
	const given = new Map(medians.map(({ day, value }) => [day, value]));
	const days = [...new Set([...byDay.keys(), ...given.keys()])].sort().reverse();
	return days.map((day) => {
		const values = byDay.get(day) ?? [];
		return { day, values, median: given.get(day) ?? medianOf(values) };
	});
}

/** A tolerance is still seen when the axis is this many times as high. */
const WIDEST_AXIS = 8;

/**
 * A round upper end for the axis that keeps the tolerance readable: all values, as long as that is at
 * most eight times the tolerance or nearly all of them lie higher; never above fifteen times it.
 * Values above the end are marked at the edge with their figure.
 */
export function axisTop(values: readonly number[], tolerance: number | null): number {
	const sorted = [...values].sort((a, b) => a - b);
	const highest = sorted.at(-1) ?? 0;
	const most = sorted[Math.floor((sorted.length - 1) * 0.9)] ?? 0;
	const least = Math.max((tolerance ?? 0) * 2, 0.1);
	const room = tolerance ? Math.max(tolerance * WIDEST_AXIS, most * 1.1) : Infinity;
	const limit = tolerance ? tolerance * 15 : Infinity;
	const wanted = Math.max(least, Math.min(highest * 1.04, room, limit));
	const power = 10 ** Math.floor(Math.log10(wanted));
	const step = [1, 1.5, 2, 3, 4, 5, 6, 8, 10].find((s) => s * power >= wanted * (1 - 1e-9)) ?? 10;
	return Number((step * power).toPrecision(3));
}

const DAY_MS = 86_400_000;

/** The axis of time: from the beginning of the first day to the end of the last, milliseconds (UTC). */
export function axisDays(times: readonly number[]): [startMs: number, endMs: number] {
	const first = times.length ? Math.min(...times) : 0;
	const last = times.length ? Math.max(...times) : first;
	return [Math.floor(first / DAY_MS) * DAY_MS, (Math.floor(last / DAY_MS) + 1) * DAY_MS];
}

/**
 * Noons of the days that are written at the axis, milliseconds: the first, the last, and whole days
 * between as evenly as days go, at most `most` in all.
 */
export function dayTicks([startMs, endMs]: readonly [number, number], most: number): number[] {
	const days = Math.round((endMs - startMs) / DAY_MS);
	const steps = Math.min(days, most) - 1;
	if (steps < 1) return [startMs + DAY_MS / 2];
	return Array.from(
		{ length: steps + 1 },
		(_, k) => startMs + (Math.round((k * (days - 1)) / steps) + 0.5) * DAY_MS
	);
}

/** "3 Nov." from YYYY-MM-DD, the same on the server and in the browser. */
export function shortDay(day: string): string {
	const months = [
		'Jan.',
		'Feb.',
		'March',
		'April',
		'May',
		'June',
		'July',
		'Aug.',
		'Sept.',
		'Oct.',
		'Nov.',
		'Dec.'
	];
	const [, month, date] = day.split('-').map(Number);
	return `${date} ${months[month - 1] ?? ''}`;
}
