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

/**
 * A round upper end for the axis that keeps the tolerance readable: above nearly all points, at most
 * eight times the tolerance. Points above it are drawn at the edge.
 */
export function axisTop(values: readonly number[], tolerance: number | null): number {
	const sorted = [...values].sort((a, b) => a - b);
	const high = sorted.length
		? sorted[Math.min(sorted.length - 1, Math.floor(sorted.length * 0.97))]
		: 1;
	const wanted = Math.max(high * 1.15, (tolerance ?? 0) * 2, 0.1);
	const capped = tolerance ? Math.min(wanted, tolerance * 12) : wanted;
	const power = 10 ** Math.floor(Math.log10(capped));
	const step = [1, 1.5, 2, 3, 4, 5, 6, 8, 10].find((s) => s * power >= capped) ?? 10;
	return Number((step * power).toPrecision(3));
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
