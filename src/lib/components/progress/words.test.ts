import { describe, expect, it } from 'vitest';
import type { PairMeasure } from '../../measurement/types';
import type { DrillProgress, StringCheck } from './types';
import { centsFigure, checkFinding, checkedNotes, finding } from './words';

const drill = (over: Partial<DrillProgress>): DrillProgress => ({
	drill: 'unison',
	points: [
		{
			attemptId: 'a',
			finishedAt: '2026-01-01T00:00:00Z',
			errorCents: 1,
			errorLowCents: 0.5,
			errorHighCents: 2,
			toleranceCents: 1,
			inside: 5,
			count: 10
		}
	],
	days: [],
	toleranceCents: 1,
	verdict: 'near',
	trend: 'closing-in',
	...over
});

const pair = (over: Partial<PairMeasure>): PairMeasure => ({
	lowerPartial: 3,
	upperPartial: 2,
	frequencyHz: 660,
	verdict: 'beating',
	tier: 'firm',
	beatRateHz: 0.741,
	ci95Hz: [0.7, 0.78],
	windowSeconds: [0.1, 6],
	reason: null,
	...over
});

const check = (pairs: PairMeasure[], over: Partial<StringCheck> = {}): StringCheck => ({
	id: 'c',
	kind: 'interval',
	notes: ['A3', 'E4'],
	source: 'file',
	result: { notes: [], pairs, advice: [] },
	checkedAt: '2026-01-01T00:00:00Z',
	...over
});

describe('finding', () => {
	it('names each drill that was begun', () => {
		expect(finding([drill({}), drill({ drill: 'interval', trend: 'there' })], 'Your')).toBe(
			'Your unisons are closing in; intervals come out within tolerance.'
		);
		expect(finding([drill({}), drill({ drill: 'interval' })], 'Your')).toBe(
			'Your unisons and intervals are closing in.'
		);
		expect(finding([drill({ points: [] })], 'Your')).toBe('Nothing measured yet.');
	});
});

describe('checkFinding', () => {
	it('says the rate with its interval', () => {
		expect(checkFinding(check([pair({})]))).toBe(
			'0.74 beats per second at partials 3:2, very likely 0.70 to 0.78.'
		);
	});
	it('says still with its limit, and why nothing could be measured', () => {
		const still = pair({ verdict: 'still', upperPartial: 3, beatRateHz: null, ci95Hz: null });
		const reason = 'No beat faster than 0.38 per second in the time heard.';
		expect(checkFinding(check([{ ...still, reason }]))).toBe(
			'Still at partial 3: no beat faster than 0.38 per second.'
		);
		const none = pair({ verdict: 'not-measurable', beatRateHz: null, reason: 'It dies too soon.' });
		expect(checkFinding(check([none]))).toBe(
			'No beat measurable at partials 3:2: It dies too soon.'
		);
		expect(checkFinding(check([]))).toBe('No beat measurable.');
	});
	it('tells a unison where String check judges it, and says when it is only about', () => {
		const at = (n: number, over: Partial<PairMeasure>) =>
			pair({ lowerPartial: n, upperPartial: n, ...over });
		const pairs = [
			at(1, { beatRateHz: 0.2, ci95Hz: [0.1, 0.3] }),
			at(4, { tier: 'about', beatRateHz: 1.23, ci95Hz: [1.11, 1.35] })
		];
		const unison: Partial<StringCheck> = { kind: 'unison', notes: ['A3'] };
		expect(checkFinding(check([pairs[1]], unison))).toBe(
			'About 1.2 beats per second at partial 4, very likely 1.1 to 1.4.'
		);
		expect(checkFinding(check(pairs, unison))).toMatch(/at partial 1,/);
		expect(checkFinding(check([pairs[0], at(4, {})], unison))).toMatch(/at partial 4,/);
	});
	it('says where a note lies', () => {
		const note = {
			note: 'A4',
			f1Hz: 439.2,
			f1Ci95Hz: null,
			inharmonicity: null,
			inharmonicityCi95: null,
			centsFromEqual: -3.15
		};
		const one = check([], {
			kind: 'note',
			notes: [],
			result: { notes: [note], pairs: [], advice: [] }
		});
		expect(checkFinding(one)).toBe('439.20 Hz, 3.1 cents below equal temperament.');
		expect(checkedNotes(one)).toBe('A4');
	});
});

describe('centsFigure', () => {
	it.each([
		[0.837, '0.84'],
		[3.21, '3.2']
	])('%f is %s', (cents, figure) => expect(centsFigure(cents)).toBe(figure));
});
