import { describe, expect, it } from 'vitest';
import { trendOf, verdictOf } from './trend';

describe('trendOf', () => {
	it.each([
		[[3, 2.5, 2], 1, 'too-few'],
		[[3, 3, 2.4, 2.2, 2, 1.8], 1, 'closing-in'],
		[[2, 2, 2.1, 1.9, 2, 2], 1, 'level'],
		[[1.2, 1.3, 1.5, 1.8, 2, 2.2], 1, 'further-off'],
		// Up and down with a bad day near the end is no direction.
		[[1.2, 5.8, 7.1, 2.4, 4.5, 2.7, 2.9], 1, 'level'],
		[[3, 2, 1, 0.8], 1, 'there']
	] as const)('%j against %f is %s', (days, tolerance, word) => {
		expect(trendOf(days, tolerance)).toBe(word);
	});
});

describe('verdictOf', () => {
	it('reads the interval, not the middle', () => {
		expect(verdictOf(0.2, 0.9, 1)).toBe('inside');
		expect(verdictOf(0.2, 1.1, 1)).toBe('near');
		expect(verdictOf(1.1, 2, 1)).toBe('outside');
	});
});
