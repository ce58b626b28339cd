import { describe, expect, it } from 'vitest';
import { createNoise } from '../testing/signals';
import {
	eigenvaluesComplex,
	invertComplex,
	multiplyComplex,
	solveComplex,
	type ComplexMatrix
} from './complex-matrix';

function randomMatrix(rows: number, columns: number, normal: () => number): ComplexMatrix {
	return Float64Array.from({ length: 2 * rows * columns }, () => normal());
}

describe('complex matrices', () => {
	it('solves what it multiplies, for every size up to 9', () => {
		const normal = createNoise(11);
		for (let n = 1; n <= 9; n++) {
			const a = randomMatrix(n, n, normal);
			const x = randomMatrix(n, 2, normal);
			const found = solveComplex(a, multiplyComplex(a, x, n, n, 2), n, 2)!;
			found.forEach((value, i) => expect(value).toBeCloseTo(x[i], 8));
		}
	});

	it('refuses a singular matrix', () => {
		expect(invertComplex(new Float64Array(8), 2)).toBeNull();
	});

	it('finds the eigenvalues of V·D·V^-1', () => {
		const normal = createNoise(12);
		for (let n = 1; n <= 8; n++) {
			const v = randomMatrix(n, n, normal);
			const d = new Float64Array(2 * n * n);
			const wanted: [number, number][] = [];
			for (let i = 0; i < n; i++) {
				wanted.push([normal(), normal()]);
				[d[2 * (i * n + i)], d[2 * (i * n + i) + 1]] = wanted[i];
			}
			const a = multiplyComplex(multiplyComplex(v, d, n, n, n), invertComplex(v, n)!, n, n, n);
			const found = eigenvaluesComplex(a, n);
			for (const [re, im] of wanted) {
				const nearest = Math.min(
					...Array.from({ length: n }, (_, k) =>
						Math.hypot(found[2 * k] - re, found[2 * k + 1] - im)
					)
				);
				expect(nearest).toBeLessThan(1e-6);
			}
		}
	});

	it('keeps eigenvalues apart that lie close together on the unit circle', () => {
		const angles = [0, 0.001, 0.02, -0.013];
		const n = angles.length;
		const normal = createNoise(13);
		const v = randomMatrix(n, n, normal);
		const d = new Float64Array(2 * n * n);
		angles.forEach((angle, i) => {
			d[2 * (i * n + i)] = Math.cos(angle);
			d[2 * (i * n + i) + 1] = Math.sin(angle);
		});
		const a = multiplyComplex(multiplyComplex(v, d, n, n, n), invertComplex(v, n)!, n, n, n);
		const found = eigenvaluesComplex(a, n);
		const sorted = angles.slice().sort((x, y) => x - y);
		const got = Array.from({ length: n }, (_, k) => Math.atan2(found[2 * k + 1], found[2 * k]));
		got.sort((x, y) => x - y).forEach((angle, i) => expect(angle).toBeCloseTo(sorted[i], 8));
	});
});
