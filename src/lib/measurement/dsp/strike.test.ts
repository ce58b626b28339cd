import { describe, expect, it } from 'vitest';
import { clippedShare, findStrike } from './strike';
import { addNoise, stiffTone } from '../testing/signals';

const tone = (atSeconds: number, seconds = 4, sampleRateHz = 48000): Float32Array =>
	stiffTone({
		sampleRateHz,
		seconds,
		strings: [{ f1Hz: 220, inharmonicity: 2e-4 }],
		seed: 4,
		atSeconds
	});

describe('finding the strike', () => {
	it('finds it within 20 ms, at any place and rate, in noise', () => {
		for (const sampleRateHz of [22050, 44100, 48000, 96000]) {
			for (const at of [0, 0.31, 1.07]) {
				const samples = tone(at, 4, sampleRateHz);
				addNoise(samples, sampleRateHz, 30, 5);
				const strike = findStrike(samples, sampleRateHz)!;
				expect(Math.abs(strike.sample / sampleRateHz - at)).toBeLessThanOrEqual(0.02);
				expect(strike.endSample).toBe(samples.length);
			}
		}
	});

	it('starts at the later of two strikes played together', () => {
		const samples = tone(0.5);
		tone(0.62).forEach((value, i) => (samples[i] += 3 * value));
		expect(Math.abs(findStrike(samples, 48000)!.sample / 48000 - 0.62)).toBeLessThanOrEqual(0.02);
	});

	it('ends before the next strike', () => {
		const samples = tone(0.1);
		for (let i = 0; i < samples.length; i++) samples[i] *= Math.exp(-i / 30000);
		tone(3.2).forEach((value, i) => (samples[i] += value));
		const strike = findStrike(samples, 48000)!;
		expect(strike.sample / 48000).toBeLessThan(0.13);
		expect(Math.abs(strike.endSample / 48000 - 3.2)).toBeLessThanOrEqual(0.02);
	});

	it('finds none in silence or in a clip of a few samples', () => {
		expect(findStrike(new Float32Array(48000), 48000)).toBeNull();
		expect(findStrike(new Float32Array(10).fill(0.5), 48000)).toBeNull();
	});
});

describe('clipping', () => {
	it('is seen where the top is cut off and not in a clean tone', () => {
		const clean = tone(0);
		expect(clippedShare(clean)).toBe(0);
		const cut = clean.map((value) => Math.max(-0.2, Math.min(0.2, value)));
		expect(clippedShare(cut)).toBeGreaterThan(1e-3);
	});
});
