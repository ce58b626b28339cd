import { describe, expect, it } from 'vitest';
import { espritPoles } from './esprit';
import { correlate, powerSums } from './pole-sums';
import { poleStep, refinePoles, residualOf, type Pole } from './refine';
import { createNoise, createUniform } from '../testing/signals';

const RATE = 93.75;

interface Part extends Pole {
	amplitude: number;
	phase: number;
}

function bandOf(parts: Part[], samples: number, noiseSd = 0, seed = 1): Float64Array {
	const z = new Float64Array(2 * samples);
	const normal = createNoise(seed);
	for (let n = 0; n < samples; n++) {
		for (const part of parts) {
			const size = part.amplitude * Math.exp((-part.decayPerSecond * n) / RATE);
			const angle = (2 * Math.PI * part.hz * n) / RATE + part.phase;
			z[2 * n] += size * Math.cos(angle);
			z[2 * n + 1] += size * Math.sin(angle);
		}
		z[2 * n] += noiseSd * Math.SQRT1_2 * normal();
		z[2 * n + 1] += noiseSd * Math.SQRT1_2 * normal();
	}
	return z;
}

describe('power sums', () => {
	it('equal the sums written out, near and far from w = 1', () => {
		for (const [size, angle] of [
			[1, 0],
			[1, 1e-9],
			[0.999, 0.3],
			[0.9, 2.5],
			[1.001, -0.01]
		]) {
			for (const count of [1, 2, 17, 100, 655]) {
				const wanted = [0, 0, 0, 0, 0, 0];
				for (let n = 0; n < count; n++) {
					for (let power = 0; power < 3; power++) {
						wanted[2 * power] += n ** power * size ** n * Math.cos(n * angle);
						wanted[2 * power + 1] += n ** power * size ** n * Math.sin(n * angle);
					}
				}
				const found = powerSums(size * Math.cos(angle), size * Math.sin(angle), count);
				const scale = count ** 3;
				found.forEach((value, i) =>
					expect(Math.abs(value - wanted[i]) / scale).toBeLessThan(1e-11)
				);
			}
		}
	});

	it('correlate an exponential with itself to its energy', () => {
		const z = bandOf([{ hz: 2, decayPerSecond: 1, amplitude: 1, phase: 0 }], 200);
		const [re, im] = poleStep({ hz: 2, decayPerSecond: 1 }, RATE);
		const [sumRe, sumIm] = correlate(z, re, im);
		expect(sumRe).toBeCloseTo(powerSums(re * re + im * im, 0, 200)[0], 9);
		expect(sumIm).toBeCloseTo(0, 9);
	});
});

describe('pole refinement', () => {
	it('recovers two components from rough starts over rates, decays and levels', () => {
		const uniform = createUniform(21);
		for (const rate of [0.3, 0.7, 2, 6, 14]) {
			for (const levelDb of [0, -6, -15]) {
				const parts: Part[] = [
					{ hz: -rate / 2, decayPerSecond: 0.3 + uniform(), amplitude: 1, phase: 6 * uniform() },
					{
						hz: rate / 2,
						decayPerSecond: 0.3 + 2 * uniform(),
						amplitude: 10 ** (levelDb / 20),
						phase: 6 * uniform()
					}
				];
				const z = bandOf(parts, 375);
				const start = parts.map((part) => ({ hz: part.hz * 1.2 + 0.02, decayPerSecond: 1 }));
				const fit = refinePoles(z, start, { rateHz: RATE, iterations: 60, maxHz: 22 })!;
				const rest = residualOf(z, fit, RATE);
				expect(Math.sqrt(rest.reduce((a, b) => a + b * b, 0) / z.length)).toBeLessThan(1e-5);
				expect(fit.components[1].hz - fit.components[0].hz).toBeCloseTo(rate, 4);
			}
		}
	});

	it('states a standard deviation that the errors keep to', () => {
		const parts: Part[] = [
			{ hz: 0, decayPerSecond: 0.5, amplitude: 1, phase: 0.3 },
			{ hz: 1.5, decayPerSecond: 0.9, amplitude: 0.5, phase: 1.1 }
		];
		const sd = 0.05;
		let squares = 0;
		let stated = 0;
		const trials = 120;
		for (let trial = 0; trial < trials; trial++) {
			const z = bandOf(parts, 280, sd, 100 + trial);
			const fit = refinePoles(z, parts, { rateHz: RATE, iterations: 30, maxHz: 22 })!;
			squares += (fit.components[1].hz - fit.components[0].hz - 1.5) ** 2;
			const c = fit.poleCovariance!;
			stated += (0.5 * sd * sd * (c[0] + c[6] - 2 * c[2])) / (2 * Math.PI) ** 2;
		}
		// 120 trials: the ratio of the two variances has a standard deviation of 0.13.
		expect(squares / stated).toBeGreaterThan(0.6);
		expect(squares / stated).toBeLessThan(1.5);
	});
});

describe('ESPRIT', () => {
	it('finds up to five noise-free components at both strides', () => {
		const all: Part[] = [
			{ hz: -3.1, decayPerSecond: 1.2, amplitude: 0.5, phase: 1 },
			{ hz: -0.4, decayPerSecond: 0.5, amplitude: 1, phase: 2 },
			{ hz: 0.5, decayPerSecond: 0.3, amplitude: 0.7, phase: 3 },
			{ hz: 4.2, decayPerSecond: 2, amplitude: 0.6, phase: 4 },
			{ hz: 9, decayPerSecond: 0.8, amplitude: 0.2, phase: 5 }
		];
		for (const stride of [1, 3]) {
			for (let order = 1; order <= 5; order++) {
				const parts = all.slice(0, order);
				const poles = espritPoles(bandOf(parts, 560), RATE, order, stride);
				for (const part of parts) {
					const nearest = Math.min(...poles.map((pole) => Math.abs(pole.hz - part.hz)));
					expect(nearest).toBeLessThan(0.05);
				}
			}
		}
	});
});
