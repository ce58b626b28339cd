import { describe, expect, it } from 'vitest';
import { dayWords } from './day-words';

describe('dayWords', () => {
	const now = new Date('2026-03-01T00:10:00Z');
	it.each([
		['2026-03-01T00:05:00.000Z', 'today'],
		['2026-02-28T23:59:59.000Z', 'yesterday'],
		['2026-02-27', '27 February'],
		['2025-12-31', '31 December 2025']
	])('%s is %s', (iso, words) => expect(dayWords(iso, now)).toBe(words));
});
