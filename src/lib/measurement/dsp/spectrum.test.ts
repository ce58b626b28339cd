import { describe, expect, it } from 'vitest';
import { findPeaks, levelSpectrum, runningFloorDb } from './spectrum';
import { addNoise, addSines } from '../testing/signals';

const RATE = 48000;

describe('level spectrum', () => {
	it('reads frequency to 0.02 Hz and level to 0.2 dB wherever the line falls', () => {
		for (let i = 0; i < 40; i++) {
			const hz = 200 + 97.3 * i + i * i * 0.013;
			const samples = new Float32Array(RATE);
			addSines(samples, RATE, [{ hz, amplitude: 0.1, decayPerSecond: 0, phase: 0.4 * i }]);
			const peaks = findPeaks(levelSpectrum(samples, RATE, 0, RATE), 50, 9000);
			const best = peaks.reduce((a, b) => (b.levelDb > a.levelDb ? b : a));
			expect(Math.abs(best.frequencyHz - hz)).toBeLessThan(0.02);
			expect(Math.abs(best.levelDb + 20)).toBeLessThan(0.2);
		}
	});

	it('finds hardly any peak in noise, and the line 25 dB above it', () => {
		const samples = new Float32Array(RATE);
		addSines(samples, RATE, [{ hz: 1234.5, amplitude: 0.1, decayPerSecond: 0, phase: 0 }]);
		addNoise(samples, RATE, 10, 3);
		const spectrum = levelSpectrum(samples, RATE, 0, RATE);
		const peaks = findPeaks(spectrum, 50, 9000);
		expect(peaks.length).toBeLessThan(40);
		const best = peaks.reduce((a, b) => (b.levelDb > a.levelDb ? b : a));
		expect(best.frequencyHz).toBeCloseTo(1234.5, 0);
		expect(best.aboveFloorDb).toBeGreaterThan(25);
		const floor = runningFloorDb(spectrum);
		expect(floor.every(Number.isFinite)).toBe(true);
	});

	it('leaves out the near side lobes of a strong line', () => {
		const samples = new Float32Array(RATE);
		addSines(samples, RATE, [{ hz: 1000.37, amplitude: 0.5, decayPerSecond: 0, phase: 1 }]);
		expect(findPeaks(levelSpectrum(samples, RATE, 0, RATE), 995, 1006)).toHaveLength(1);
	});
});
