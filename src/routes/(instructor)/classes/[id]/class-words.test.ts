import { describe, expect, it } from 'vitest';
import { flagOf, leadWords, whenWords } from './class-words';

describe('whenWords', () => {
	it.each([
		['2026-03-02', '2026-05-10', '2026-03-02', 'week 1 of 10'],
		['2026-03-02', '2026-05-10', '2026-05-10', 'week 10 of 10'],
		['2026-03-02', '2026-03-06', '2026-03-04', 'day 3 of 5'],
		['2026-03-02', '2026-03-06', '2026-03-07', 'it is over'],
		['2026-03-02', null, '2026-03-20', 'week 3'],
		['2026-03-02', null, '2026-03-01', 'begins tomorrow'],
		['2026-03-02', null, '2026-02-20', 'begins in 10 days'],
		[null, '2026-03-06', '2026-02-20', null]
	])('%s to %s on %s: %s', (from, to, today, words) => {
		expect(whenWords(from, to, today)).toBe(words);
	});
});

describe('flagOf', () => {
	it.each([
		[null, 'Not begun yet'],
		[5, null],
		[6, 'Away for 6 days']
	])('%s days away: %s', (daysAway, flag) => expect(flagOf({ daysAway })).toBe(flag));
});

describe('leadWords', () => {
	it('tells an empty class from one at work', () => {
		expect(leadWords([], 'begins in 10 days')).toBe('Nobody is in it yet; begins in 10 days.');
		const idle = {
			id: 'a',
			name: 'A',
			attempts: 0,
			seconds: 0,
			secondsThisWeek: 0,
			lastPractice: null,
			daysAway: null,
			drills: { unison: null, interval: null },
			lastStringCheck: null
		};
		expect(leadWords([idle], null)).toBe('One student. Nobody has begun yet.');
		expect(leadWords([idle, { ...idle, attempts: 3, daysAway: 1 }], 'week 2')).toBe(
			'Two students, week 2. Inside for sure: the unisons of nobody, the intervals of nobody; one not at work.'
		);
	});
});
