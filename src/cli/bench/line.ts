/** One figure of the benchmark, beside its bar and a reference measured in the same run. */
export interface BenchLine {
	name: string;
	value: number;
	unit: string;
	/** The limit to stay within; null where there is none. */
	bar: number | null;
	/** Whether the bar is met; null where there is none. */
	met: boolean | null;
	/** Something comparable, measured in the same run on the same machine; null where there is none. */
	reference: { name: string; value: number } | null;
	/** value / reference.value; null without a reference. */
	ratio: number | null;
}

/**
 * Makes a line. `bar` is an upper limit unless `atLeast` is set.
 */
export function benchLine(
	name: string,
	value: number,
	unit: string,
	options: {
		bar?: number | null;
		atLeast?: boolean;
		reference?: { name: string; value: number } | null;
	} = {}
): BenchLine {
	const bar = options.bar ?? null;
	const reference = options.reference ?? null;
	const met = bar === null ? null : options.atLeast ? value >= bar : value <= bar;
	return {
		name,
		value,
		unit,
		bar,
		met,
		reference,
		ratio: reference === null ? null : value / reference.value
	};
}

/** Quantile (0..1) of a list by linear interpolation; NaN for an empty list. */
export function quantile(values: readonly number[], q: number): number {
	if (values.length === 0) return Number.NaN;
	const sorted = [...values].sort((a, b) => a - b);
	const position = (sorted.length - 1) * q;
	const low = Math.floor(position);
	const high = Math.ceil(position);
	return sorted[low] + (sorted[high] - sorted[low]) * (position - low);
}
