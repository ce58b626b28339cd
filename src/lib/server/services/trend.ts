/**
 * What a run of daily medians says, in one word.
 *
 * there: the latest third lies within the tolerance. closing-in / further-off: the latest third is
 * smaller / larger than the first by more than 15 % (a planning figure, no source). level: neither.
 * too-few: under four days of practice.
 */
export type Trend = 'there' | 'closing-in' | 'level' | 'further-off' | 'too-few';

/** Days a trend looks back on. */
export const TREND_DAYS = 28;

const CHANGE = Math.log(1.15);

function median(values: readonly number[]): number {
	const sorted = [...values].sort((a, b) => a - b);
	const half = sorted.length >> 1;
	return sorted.length % 2 === 1 ? sorted[half] : (sorted[half - 1] + sorted[half]) / 2;
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
	if (change < -CHANGE) return 'closing-in';
	return change > CHANGE ? 'further-off' : 'level';
}

/** Where an interval lies against an upper limit. */
export function verdictOf(low: number, high: number, limit: number): 'inside' | 'near' | 'outside' {
	if (high <= limit) return 'inside';
	return low > limit ? 'outside' : 'near';
}
