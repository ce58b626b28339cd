import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { beatsAbove, knotsOf, leastSpacing, numberEvery } from './knots';
import { nearestTo, type Point } from './shore';

/** Land 100 px high over a base at 110 with dips of the given half width at the given places. */
function land(dips: readonly number[], halfWidth: number, depth = 60): Point[] {
	return Array.from({ length: 801 }, (_, k) => {
		const x = k * 0.5;
		const away = Math.min(...dips.map((dip) => Math.abs(x - dip)), Infinity);
		return [x, 10 + depth * Math.max(0, 1 - away / halfWidth)] as const;
	});
}
const options = { widthPx: 400, baseY: 110, every: 1 };

describe('numbers of knots', () => {
	it('stand just over the knot in a wide dip', () => {
		const coast = land([100], 80);
		const [knot] = knotsOf([100], { ...options, coast });
		expect(knot).toMatchObject({ number: 1, x: 100, y: 70, textX: 100 });
		expect(knot.y - knot.textY).toBeGreaterThanOrEqual(11);
		expect(knot.y - knot.textY).toBeLessThan(24);
	});

	it('stay off the land on both sides, however narrow the dip', () => {
		fc.assert(
			fc.property(fc.double({ min: 1, max: 90, noNaN: true }), (halfWidth) => {
				const coast = land([100], halfWidth);
				const [knot] = knotsOf([100], { ...options, coast });
				for (const x of [93, 97, 100, 103, 107])
					expect(knot.textY).toBeLessThan(nearestTo(coast, x)[1]);
			})
		);
	});

	it('stand at the foot of the target’s land, or over it where the dip goes down to the foot', () => {
		const shallow = knotsOf([100], { ...options, coast: land([100], 40, 30), footY: 104 });
		expect(shallow[0].textY).toBe(104);
		const deep = knotsOf([100], { ...options, coast: land([100], 40, 95), footY: 104 });
		expect(deep[0].textY).toBeLessThan(deep[0].y);
	});

	it('never leave the picture', () => {
		const knots = knotsOf([1, 399], { ...options, coast: land([1, 399], 30) });
		expect(knots[0].textX).toBeGreaterThanOrEqual(8);
		expect(knots[1].textX).toBeLessThanOrEqual(392);
	});

	it('are thinned out where they crowd; every knot stays', () => {
		expect([100, 24, 12, 5, 2.4].map(numberEvery)).toEqual([1, 1, 2, 5, 10]);
		expect(numberEvery(leastSpacing([7]))).toBe(1);
		const xs = Array.from({ length: 12 }, (_, k) => 20 + k * 22);
		const knots = knotsOf(xs, {
			...options,
			coast: land(xs, 8),
			every: numberEvery(leastSpacing(xs))
		});
		expect(knots).toHaveLength(12);
		expect(knots.filter(({ textX }) => textX !== null).map(({ number }) => number)).toEqual([
			2, 4, 6, 8, 10, 12
		]);
	});
});

describe('beats on the floor of the drawing', () => {
	const coast: Point[] = Array.from({ length: 401 }, (_, x) => [x, x < 200 ? 40 : 106]);

	it('are left out from where the land no longer stands', () => {
		expect(beatsAbove(coast, [50, 150, 190, 300, 390], 110)).toBe(3);
		expect(beatsAbove(coast, [50], 110)).toBe(1);
		expect(beatsAbove([], [50], 110)).toBe(0);
	});
});
