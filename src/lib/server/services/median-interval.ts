/**
 * The median of a sample and its distribution-free interval from order statistics.
 *
 * The k-th smallest and k-th largest of n values enclose the median of their population with
 * probability 1 - 2·P(X < k), X binomial(n, 1/2) (Conover, Practical Nonparametric Statistics,
 * 3rd ed. 1999, section 3.2). The largest k that keeps 95 % is taken; ten values give the second
 * smallest to the second largest (97.9 %). Under six values no pair reaches 95 %: then the smallest
 * and the largest are returned.
 * @param values any order, any unit; at least one.
 */
export function medianWithInterval(values: readonly number[]): {
	median: number;
	low: number;
	high: number;
} {
	if (values.length === 0) throw new RangeError('the median of nothing');
	const sorted = [...values].sort((a, b) => a - b);
	const n = sorted.length;
	const upper = sorted[Math.floor(n / 2)];
	const median = n % 2 === 1 ? upper : (sorted[n / 2 - 1] + upper) / 2;
	const k = orderStatistic(n);
	return { median, low: sorted[k - 1], high: sorted[n - k] };
}

/** Largest k >= 1 with 2·P(X <= k - 1) <= 0.05 for X binomial(n, 1/2); 1 where there is none. */
function orderStatistic(n: number): number {
	let probability = Math.pow(0.5, n);
	let cumulative = probability;
	let k = 1;
	for (let successes = 1; successes < n / 2; successes++) {
		probability *= (n - successes + 1) / successes;
		cumulative += probability;
		if (2 * cumulative > 0.05) break;
		k = successes + 1;
	}
	return k;
}
