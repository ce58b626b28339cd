import { describe, expect, it } from 'vitest';
import { createRandom, integer, normal, pick, shuffled, uniform } from './random';

describe('seeded random numbers', () => {
	it('repeats a sequence for a seed and differs between neighbouring seeds', () => {
		const first = Array.from({ length: 20 }, createRandom(7));
		expect(Array.from({ length: 20 }, createRandom(7))).toEqual(first);
		expect(Array.from({ length: 20 }, createRandom(8))).not.toEqual(first);
		expect(new Set(first).size).toBe(20);
	});

	it('keeps its sequence from version to version, since stored attempts are replayed from it', () => {
		const random = createRandom(1);
		expect([random(), random(), random()].map((value) => Math.floor(value * 1e6))).toEqual([
			272342, 306857, 594010
		]);
	});

	it('is uniform: mean, variance and sixteen bins of 160,000 draws', () => {
		const random = createRandom(2024);
		const bins = new Array<number>(16).fill(0);
		const draws = 160_000;
		let sum = 0;
		let squares = 0;
		for (let i = 0; i < draws; i += 1) {
			const value = random();
			bins[Math.floor(value * 16)] += 1;
			sum += value;
			squares += value * value;
		}
		expect(sum / draws).toBeCloseTo(0.5, 2);
		expect(squares / draws - (sum / draws) ** 2).toBeCloseTo(1 / 12, 2);
		const chiSquare = bins.reduce((total, n) => total + (n - draws / 16) ** 2 / (draws / 16), 0);
		// 99.9 % point of chi-square with 15 degrees of freedom.
		expect(chiSquare).toBeLessThan(37.7);
	});

	it('draws whole numbers to both ends, items, orders and normal deviates', () => {
		const random = createRandom(5);
		const whole = new Set(Array.from({ length: 500 }, () => integer(random, -2, 3)));
		expect([...whole].sort((a, b) => a - b)).toEqual([-2, -1, 0, 1, 2, 3]);
		expect(['a', 'b']).toContain(pick(random, ['a', 'b']));
		expect(() => pick(random, [])).toThrow(RangeError);
		expect([...shuffled(random, [1, 2, 3, 4])].sort()).toEqual([1, 2, 3, 4]);
		const normals = Array.from({ length: 20_000 }, () => normal(random));
		const mean = normals.reduce((a, b) => a + b, 0) / normals.length;
		const variance = normals.reduce((a, b) => a + (b - mean) ** 2, 0) / normals.length;
		expect(Math.abs(mean)).toBeLessThan(0.03);
		expect(variance).toBeCloseTo(1, 1);
		const value = uniform(random, 3, 4);
		expect(value >= 3 && value < 4).toBe(true);
	});
});
