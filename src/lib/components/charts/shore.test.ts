import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { graduations, needsRule, quietestTimes, rateFromBeats, tieSentence } from './beats';
import { ebbPoints } from './ebb';
import {
	areaOf,
	coastPoints,
	levelAt,
	loudestDb,
	lowestNear,
	nearestTo,
	pathOf,
	SHORE_RANGE_DB,
	waterline,
	type Shore
} from './shore';

/** Two partials of nearly the same frequency that decay: the level of their sum. Test data. */
function beating(rateHz: number, phase = 0.2, seconds = 4, step = 0.005): Shore {
	const timesS = Array.from({ length: Math.round(seconds / step) + 1 }, (_, k) => k * step);
	const levelDb = timesS.map((t) => {
		const a = Math.exp(-0.92 * t);
		const b = 0.8 * Math.exp(-0.98 * t);
		const angle = 2 * Math.PI * rateHz * t + phase;
		return 20 * Math.log10(Math.hypot(a + b * Math.cos(angle), b * Math.sin(angle)) / 1.8);
	});
	return { timesS, levelDb };
}

describe('coast', () => {
	const shore: Shore = { timesS: [0, 1, 2], levelDb: [0, -23, -200] };

	it('reads levels by straight lines and holds the ends', () => {
		expect(levelAt(shore, 0.5)).toBeCloseTo(-11.5, 10);
		expect(levelAt(shore, -1)).toBe(0);
		expect(levelAt(shore, 9)).toBe(-200);
		expect(levelAt({ timesS: [], levelDb: [] }, 1)).toBe(-Infinity);
	});

	it('puts the loudest at the margin and half the range half-way up', () => {
		const points = coastPoints(shore, { widthPx: 300, heightPx: 106, seconds: 2 });
		expect(points[0]).toEqual([0, 6]);
		expect(nearestTo(points, 150)[1]).toBeCloseTo(106 - (23 / SHORE_RANGE_DB) * 100, 6);
	});

	it('never leaves its field, whatever the levels', () => {
		fc.assert(
			fc.property(
				fc.array(fc.double({ min: -400, max: 60 }), { minLength: 1, maxLength: 60 }),
				(levelDb) => {
					const timesS = levelDb.map((_, k) => k * 0.1);
					const options = { widthPx: 350, heightPx: 112, seconds: 4 };
					for (const [x, y] of coastPoints({ timesS, levelDb }, options)) {
						expect(x).toBeGreaterThanOrEqual(0);
						expect(x).toBeLessThanOrEqual(350);
						expect(y).toBeGreaterThanOrEqual(6 - 1e-9);
						expect(y).toBeLessThanOrEqual(112);
					}
				}
			)
		);
	});

	it('draws two shores by one loudness', () => {
		const quieter: Shore = { timesS: [0, 4], levelDb: [-23, -23] };
		const topDb = loudestDb(shore, quieter);
		const [point] = coastPoints(quieter, { widthPx: 100, heightPx: 106, seconds: 4, topDb });
		expect(point[1]).toBeCloseTo(56, 6);
	});

	it('ends where a short recording ends', () => {
		const points = coastPoints(shore, { widthPx: 400, heightPx: 100, seconds: 4 });
		expect(points.at(-1)?.[0]).toBeCloseTo(200, -1);
	});

	it('keeps the bottom of a dip narrower than a pixel', () => {
		const narrow: Shore = { timesS: [0, 1.001, 1.002, 1.003, 4], levelDb: [0, 0, -30, 0, 0] };
		const points = coastPoints(narrow, { widthPx: 300, heightPx: 106, seconds: 4 });
		const [x, y] = lowestNear(points, (1.002 / 4) * 300);
		expect(x).toBeCloseTo(75.15, 6);
		expect(y).toBeCloseTo(106 - (16 / SHORE_RANGE_DB) * 100, 6);
	});

	it('makes paths', () => {
		expect(
			pathOf([
				[0, 1.26],
				[2, 3]
			])
		).toBe('M0 1.3L2 3');
		expect(
			areaOf(
				[
					[0, 1],
					[2, 3]
				],
				9
			)
		).toBe('M0 1L2 3L2 9L0 9Z');
		expect(areaOf([], 9)).toBe('');
	});
});

describe('waterline', () => {
	it('stands a radius above level land', () => {
		const flat = Array.from({ length: 100 }, (_, k) => [k * 1.5, 50] as const);
		for (const [, y] of waterline(flat, 5)) expect(y).toBeCloseTo(45, 10);
	});

	it('keeps the distance of the radius from every point of the coast', () => {
		const coast = coastPoints(beating(1.5), { widthPx: 600, heightPx: 150, seconds: 4 });
		const line = waterline(coast, 10);
		// Easing over neighbours may shave a corner by a little; dilation itself would not.
		for (const [x, y] of line)
			for (const [coastX, coastY] of coast)
				expect(Math.hypot(coastX - x, coastY - y)).toBeGreaterThan(10 - 2.5);
	});
});

describe('beats', () => {
	it.each([0.5, 0.9, 2.3, 6.76])('finds where %s beats per second are quietest', (rateHz) => {
		const times = quietestTimes(beating(rateHz, 0.2), rateHz, 4);
		const expected: number[] = [];
		for (let k = 0; ; k++) {
			const t = (Math.PI - 0.2 + 2 * Math.PI * k) / (2 * Math.PI * rateHz);
			if (t > 4) break;
			if (t > 0.05) expected.push(t);
		}
		expect(times.length).toBe(expected.length);
		times.forEach((t, k) => expect(Math.abs(t - expected[k])).toBeLessThan(0.08 / rateHz));
		if (times.length > 2) expect(rateFromBeats(times)).toBeCloseTo(rateHz, 1);
	});

	it('finds none without a rate or without a shore', () => {
		expect(quietestTimes(beating(1), 0, 4)).toEqual([]);
		expect(quietestTimes({ timesS: [], levelDb: [] }, 1, 4)).toEqual([]);
	});

	it('changes to the rule above four a second', () => {
		const at = (rateHz: number) => Array.from({ length: 8 }, (_, k) => (k + 0.5) / rateHz);
		expect(needsRule(at(3.9), at(3.5))).toBe(false);
		expect(needsRule(at(3.9), at(4.2))).toBe(true);
		expect(graduations(at(7)).map((g) => g.long)).toEqual([
			false,
			false,
			false,
			false,
			true,
			false,
			false,
			false
		]);
	});

	it('says which beat is the slower one', () => {
		expect(tieSentence(0.49, 0.9)).toMatch(/slower/);
		expect(tieSentence(7, 6.76)).toMatch(/faster/);
		expect(tieSentence(0.9, 0.9)).toMatch(/same rate/);
		expect(tieSentence(0, 0.9)).toMatch(/does not beat/);
	});
});

describe('the ebb', () => {
	it('comes to rest at the right and stays in its field', () => {
		const points = ebbPoints(1440, 120);
		const ys = points.map(([, y]) => y);
		const spread = (part: number[]) => Math.max(...part) - Math.min(...part);
		expect(spread(ys.slice(0, 60))).toBeGreaterThan(20);
		expect(spread(ys.slice(-40))).toBeLessThan(3);
		expect(Math.min(...ys)).toBeGreaterThan(0);
		expect(Math.max(...ys)).toBeLessThan(120);
	});
});
