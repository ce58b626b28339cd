import { describe, expect, it } from 'vitest';
import { axisDays, axisTop, dayOf, daysOf, dayTicks, medianOf, shortDay } from './curve';
import { domainFor, rangeGeometry, tagPlaces, verdictOf } from './range';

describe('verdict of an interval', () => {
	it('is inside, outside or too close to say', () => {
		expect(verdictOf([0.87, 0.95], [0.7, 1.1])).toBe('inside');
		expect(verdictOf([0.4, 0.6], [0.7, 1.1])).toBe('outside');
		expect(verdictOf([1.05, 1.2], [0.7, 1.1])).toBe('near');
		expect(verdictOf([0.1, 0.2], [null, 0.25])).toBe('inside');
		expect(verdictOf([0.3, 0.4], [null, 0.25])).toBe('outside');
		expect(verdictOf([0.95, 0.87], [0.7, 1.1])).toBe('inside');
	});
});

describe('range glyph', () => {
	const shape = { tolerance: [0.7, 1.1], domain: [0, 2], widthPx: 210 } as const;

	it('places gate, bar and mark on one scale', () => {
		const g = rangeGeometry({ ...shape, value: 1, interval: [0.5, 1.5] });
		expect(g).toMatchObject({ gateLeft: 75, gateWidth: 40, mark: 105, bar: [55, 155] });
	});

	it('has one bracket for a one-sided limit', () => {
		const g = rangeGeometry({ ...shape, tolerance: [null, 0.6], value: 0.2 });
		expect(g.postLeft).toBeNull();
		expect(g.postRight).toBe(65);
		expect(g.gateLeft).toBe(5);
	});

	it('keeps what lies beyond the domain at its edge', () => {
		expect(rangeGeometry({ ...shape, value: 99 }).mark).toBe(205);
		expect(rangeGeometry({ ...shape, value: null }).mark).toBeNull();
		expect(rangeGeometry({ ...shape, value: Number.NaN }).mark).toBeNull();
	});

	it('writes the figures of both brackets, or one for both where they are close', () => {
		const wide = { gateLeft: 100, gateWidth: 90 };
		const close = { gateLeft: 140, gateWidth: 20 };
		expect(tagPlaces(['−1.00', '+1.00'], wide, 340)).toEqual([
			{ text: '−1.00', x: 100 },
			{ text: '+1.00', x: 190 }
		]);
		expect(tagPlaces(['−1.00', '+1.00'], close, 340)).toEqual([{ text: '± 1.00', x: 150 }]);
		expect(tagPlaces(['0.70', '1.10'], close, 340)).toEqual([{ text: '0.70 to 1.10', x: 150 }]);
	});

	it('keeps those figures in the picture', () => {
		const [once] = tagPlaces(['0.70', '1.10'], { gateLeft: 200, gateWidth: 10 }, 210);
		expect(once.x + (once.text.length * 7.8) / 2).toBeLessThanOrEqual(210);
		const [least] = tagPlaces(['0.70', '1.10'], { gateLeft: 5, gateWidth: 150 }, 210);
		expect(least.x - (least.text.length * 7.8) / 2).toBeGreaterThanOrEqual(0);
	});

	it('finds a domain that holds everything', () => {
		const [lo, hi] = domainFor([-0.39, 0.39], 2.5, [2, 3]);
		expect(lo).toBeLessThan(-0.39);
		expect(hi).toBeGreaterThan(3);
		expect(domainFor([null, 0.6], 0.2)[0]).toBe(0);
		expect(domainFor([null, null], null)).toEqual([0, 1]);
	});
});

describe('curve', () => {
	it('gathers attempts by day, latest first, with a median', () => {
		const points = [
			{ at: '2026-11-02T09:00:00Z', value: 3 },
			{ at: '2026-11-01T09:00:00Z', value: 2 },
			{ at: Date.parse('2026-11-01T10:00:00Z'), value: 1 }
		];
		expect(daysOf(points, [{ day: '2026-11-02', value: 2.5 }])).toEqual([
			{ day: '2026-11-02', values: [3], median: 2.5 },
			{ day: '2026-11-01', values: [2, 1], median: 1.5 }
		]);
		expect(medianOf([])).toBeNull();
	});

	it('rounds the axis up and keeps the tolerance in sight', () => {
		expect(axisTop([0.5, 0.9, 1.2], 0.6)).toBe(1.5);
		expect(axisTop([], 0.6)).toBe(1.5);
		expect(axisTop([500, 500, 500], 1)).toBe(15);
		expect(axisTop([0.2], null)).toBeGreaterThanOrEqual(0.2);
	});

	it('shows every value up to eight times the tolerance, and nearly all beyond', () => {
		const many = Array.from({ length: 30 }, () => 0.8);
		expect(axisTop([...many, 3.7], 1)).toBeGreaterThanOrEqual(3.7);
		expect(axisTop([...many, 7.5], 1)).toBeGreaterThanOrEqual(7.5);
		expect(axisTop([...many, 40], 1)).toBe(8);
		expect(axisTop([...many.map(() => 10), 40], 1)).toBe(15);
	});

	it('has an axis of whole days that ends with the last day', () => {
		const span = axisDays([Date.parse('2026-11-29T22:15:00Z'), Date.parse('2026-12-01T13:00:00Z')]);
		expect(span.map((ms) => new Date(ms).toISOString())).toEqual([
			'2026-11-29T00:00:00.000Z',
			'2026-12-02T00:00:00.000Z'
		]);
		expect(dayTicks(span, 6).map(dayOf)).toEqual(['2026-11-29', '2026-11-30', '2026-12-01']);
	});

	it('writes the first day, the last, and whole days between', () => {
		const span = axisDays([Date.parse('2026-10-05T09:00:00Z'), Date.parse('2026-12-01T20:00:00Z')]);
		expect(dayTicks(span, 3).map(dayOf)).toEqual(['2026-10-05', '2026-11-03', '2026-12-01']);
		const six = dayTicks(span, 6).map(dayOf);
		expect(six).toHaveLength(6);
		expect(new Set(six).size).toBe(6);
		expect([six[0], six[5]]).toEqual(['2026-10-05', '2026-12-01']);
		const one = axisDays([Date.parse('2026-12-01T20:00:00Z')]);
		expect(dayTicks(one, 6).map(dayOf)).toEqual(['2026-12-01']);
	});

	it('writes a day the same everywhere', () => {
		expect(shortDay('2026-11-03')).toBe('3 Nov.');
	});
});
