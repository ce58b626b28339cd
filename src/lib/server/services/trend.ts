import { median } from '../../drills/score';

/**
 * What a run of daily medians says, in one word.
 *
 * there: the latest third lies within the tolerance. closing-in / further-off: the latest third is
 * smaller / larger than the first by more than 15 % (a planning figure, no source), and the days as a
 * whole go that way too, by more than chance would make likely. level: neither. too-few: under four
 * days of practice.
 */
export type Trend = 'there' | 'closing-in' | 'level' | 'further-off' | 'too-few';

/** Days a trend looks back on. */
export const TREND_DAYS = 28;

const CHANGE = Math.log(1.15);
/** One-sided 10 % point of the normal distribution. */
const UNLIKELY = 1.2816;

/**
 * Kendall's rank correlation of the days with their order, as a standard normal deviate: positive when
 * later days are larger (Kendall 1975, Rank Correlation Methods; from memory). Ties count as neither.
 */
function drift(values: readonly number[]): number {
	let s = 0;
	for (let later = 1; later < values.length; later++) {
		for (let earlier = 0; earlier < later; earlier++)
			s += Math.sign(values[later] - values[earlier]);
	}
	const n = values.length;
	return s / Math.sqrt((n * (n - 1) * (2 * n + 5)) / 18);
}

/**
 * @param dailyMedians oldest first, same unit as the tolerance, all > 0 or 0.
 * @param tolerance largest value that counts as inside.
 */
export function trendOf(dailyMedians: readonly number[], tolerance: number): Trend {
	if (dailyMedians.length < 4) return 'too-few';
	const third = Math.ceil(dailyMedians.length / 3);
	const first = median(dailyMedians.slice(0, third));
	const last = median(dailyMedians.slice(-third));
	if (last <= tolerance) return 'there';
	const change = Math.log(last / Math.max(first, Number.MIN_VALUE));
	const going = drift(dailyMedians);
	if (change < -CHANGE && going < -UNLIKELY) return 'closing-in';
	return change > CHANGE && going > UNLIKELY ? 'further-off' : 'level';
}

/** Where an interval lies against an upper limit. */
export function verdictOf(low: number, high: number, limit: number): 'inside' | 'near' | 'outside' {
	if (high <= limit) return 'inside';
	return low > limit ? 'outside' : 'near';
}
