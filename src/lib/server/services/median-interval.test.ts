import { describe, expect, it } from 'vitest';
import { createRandom } from '../../acoustics/random';
import { medianWithInterval } from './median-interval';

describe('medianWithInterval', () => {
	it('takes the second smallest and second largest of ten', () => {
		const values = [9, 1, 8, 2, 7, 3, 6, 4, 5, 10];
		expect(medianWithInterval(values)).toEqual({ median: 5.5, low: 2, high: 9 });
	});

	it('takes the sixth from either end of twenty (Conover 1999, table A3 by binomial(20, 1/2))', () => {
		const values = Array.from({ length: 20 }, (_, i) => i + 1);
		expect(medianWithInterval(values)).toEqual({ median: 10.5, low: 6, high: 15 });
	});

	it('gives the extremes where there are too few values', () => {
		expect(medianWithInterval([3, 1, 2])).toEqual({ median: 2, low: 1, high: 3 });
		expect(medianWithInterval([4])).toEqual({ median: 4, low: 4, high: 4 });
	});

	it('encloses the true median in at least 95 % of samples of ten', () => {
		const random = createRandom(7);
		let enclosed = 0;
		for (let run = 0; run < 4000; run++) {
			const sample = Array.from({ length: 10 }, () => -Math.log(1 - random()));
			const { low, high } = medianWithInterval(sample);
			if (low <= Math.LN2 && Math.LN2 <= high) enclosed++;
		}
		expect(enclosed / 4000).toBeGreaterThan(0.95);
	});

	it('refuses an empty sample', () => {
		expect(() => medianWithInterval([])).toThrow(RangeError);
	});
});
