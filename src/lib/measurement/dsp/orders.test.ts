import { describe, expect, it } from 'vitest';
import type { BandSignal } from './band';
import { cleanOrder } from './clean-answer';
import { allPairs, allSplits, audibleComponents } from './clusters';
import { chooseOrder, type OrderFit } from './orders';
import { intervalRate, unisonRate } from './rate-rule';
import { residualSpectrum, whitePeakLimit } from './residual';
import { createNoise, createUniform } from '../testing/signals';

const RATE = 93.75;

type Part = [hz: number, amplitude: number, decayPerSecond: number, phase: number];

function bandOf(parts: Part[], seconds: number, noiseSd: number, seed: number): BandSignal {
	const samples = Math.round(seconds * RATE);
	const z = new Float64Array(2 * samples);
	const normal = createNoise(seed);
	for (let n = 0; n < samples; n++) {
		for (const [hz, amplitude, decay, phase] of parts) {
			const size = amplitude * Math.exp((-decay * n) / RATE);
			z[2 * n] += size * Math.cos((2 * Math.PI * hz * n) / RATE + phase);
			z[2 * n + 1] += size * Math.sin((2 * Math.PI * hz * n) / RATE + phase);
		}
		z[2 * n] += noiseSd * Math.SQRT1_2 * normal();
		z[2 * n + 1] += noiseSd * Math.SQRT1_2 * normal();
	}
	return { z, rateHz: RATE, centreHz: 440, startSeconds: 0, passHz: 20 };
}

describe('order selection', () => {
	it('finds one, two and three components in noise in at least 19 of 20 bands', () => {
		const uniform = createUniform(51);
		let right = 0;
		const trials = 60;
		for (let trial = 0; trial < trials; trial++) {
			const order = 1 + (trial % 3);
			const parts = Array.from({ length: order }, (_, k): Part => [
				1.3 * k - 1,
				0.5 + 0.5 * uniform(),
				0.3 + uniform(),
				6 * uniform()
			]);
			const fit = cleanOrder(bandOf(parts, 4, 0.02, trial), [], 3);
			if (fit?.order === order) right++;
		}
		expect(right).toBeGreaterThanOrEqual(57);
	});

	it('rarely takes white noise for a line', () => {
		let above = 0;
		for (let seed = 0; seed < 300; seed++) {
			const { z } = bandOf([], 3, 1, seed + 500);
			if (residualSpectrum(z, RATE, 20).peakOverMean > whitePeakLimit(z.length / 2, RATE, 20))
				above++;
		}
		expect(above).toBeLessThanOrEqual(9);
	});

	it('estimates the noise variance', () => {
		let sum = 0;
		for (let seed = 0; seed < 50; seed++) {
			sum += residualSpectrum(bandOf([], 4, 0.5, seed + 900).z, RATE, 20).variance / 50;
		}
		expect(sum).toBeGreaterThan(0.22);
		expect(sum).toBeLessThan(0.28);
	});
});

describe('clusters', () => {
	const groups: Part[] = [
		[-2.6, 0.5, 0.6, 1],
		[-2.4, 0.3, 0.4, 2],
		[2.5, 0.4, 0.8, 3],
		[2.7, 0.2, 0.5, 4]
	];

	it('reads the beat between two groups, not one inside a group', () => {
		const band = bandOf(groups, 6, 0.001, 61);
		const fits: OrderFit[] = [];
		const chosen = chooseOrder(band, fits, { maxOrder: 7, gainDb: 2, enoughDb: -30 });
		const window = { rateHz: RATE, from: 0, to: band.z.length / 2 - 1 };
		const ruled = unisonRate(chosen, window, 22);
		expect(ruled).not.toBeNull();
		if (ruled === null || typeof ruled === 'string') throw new Error('no rate');
		expect(Math.abs(ruled.split.rateHz - 5.1)).toBeLessThan(0.15);
		const expected = { lowHz: -2.5, highHz: 2.6, sigmaHz: 2.3 };
		expect(intervalRate(chosen, window, 22, expected)!.split.rateHz).toBeCloseTo(5.1, 0);
		expect(intervalRate(chosen, window, 22, { ...expected, highHz: 12 })).toBeNull();
	});

	it('judges a pair within the whole sound', () => {
		const band = bandOf(groups.slice(0, 3), 4, 0, 62);
		const fits: OrderFit[] = [];
		const chosen = chooseOrder(band, fits, { maxOrder: 3, gainDb: 1, enoughDb: -60 });
		const window = { rateHz: RATE, from: 0, to: band.z.length / 2 - 1 };
		const parts = audibleComponents(chosen.fit.components, window, -40, 22);
		expect(parts).toHaveLength(3);
		for (const pair of allPairs(parts, window)) expect(pair.depth).toBeLessThan(1);
		expect(allSplits(parts, window)).toHaveLength(2);
		const two = parts.slice(0, 2);
		expect(allPairs(two, window)[0].depth).toBeCloseTo(allSplits(two, window)[0].depth, 9);
	});
});
