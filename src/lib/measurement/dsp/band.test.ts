import { describe, expect, it } from 'vitest';
import { bandShape, clipSpectrum, extractBand, filterSeconds } from './band';
import { shorelineDb } from './shoreline';
import { addSines, createUniform } from '../testing/signals';

describe('band extraction', () => {
	it('passes damped sinusoids exactly: amplitude, frequency and decay', () => {
		const uniform = createUniform(8);
		for (const sampleRateHz of [22050, 44100, 48000, 96000]) {
			const samples = new Float32Array(3 * sampleRateHz);
			const hz = 300 + 900 * uniform();
			const sine = { hz: hz + 12, amplitude: 0.3, decayPerSecond: 1.7, phase: 1 };
			addSines(samples, sampleRateHz, [sine]);
			const clip = clipSpectrum(samples, sampleRateHz);
			const band = extractBand(clip, hz, bandShape(200), 0.05, 3)!;
			for (let n = 0; n < band.z.length / 2; n += 7) {
				const t = band.startSeconds + n / band.rateHz;
				const size = 0.3 * Math.exp(-1.7 * t);
				const angle = 2 * Math.PI * (sine.hz - band.centreHz) * t + 1;
				expect(Math.abs(band.z[2 * n] - size * Math.cos(angle))).toBeLessThan(2e-4 * size);
				expect(Math.abs(band.z[2 * n + 1] - size * Math.sin(angle))).toBeLessThan(2e-4 * size);
			}
		}
	});

	it('keeps a neighbour out by 75 dB', () => {
		const samples = new Float32Array(3 * 48000);
		addSines(samples, 48000, [{ hz: 583, amplitude: 1, decayPerSecond: 0.5, phase: 0 }]);
		const band = extractBand(clipSpectrum(samples, 48000), 500, bandShape(83), 0.05, 3)!;
		for (const value of band.z) expect(Math.abs(value)).toBeLessThan(2e-4);
	});

	it('never reaches before its start: the filter lies inside the sound', () => {
		const samples = new Float32Array(2 * 48000);
		const shape = bandShape(60);
		const band = extractBand(clipSpectrum(samples, 48000), 500, shape, 0.3, 1.5)!;
		const end = band.startSeconds + (band.z.length / 2 - 1) / band.rateHz;
		expect(band.startSeconds - filterSeconds(shape) / 2).toBeGreaterThanOrEqual(0.3 - 1e-9);
		expect(end + filterSeconds(shape) / 2).toBeLessThanOrEqual(1.5 + 1e-9);
		expect(extractBand(clipSpectrum(samples, 48000), 500, shape, 0.3, 0.5)).toBeNull();
	});
});

describe('shoreline', () => {
	it('follows a beat: full at the maxima, deep at the minima', () => {
		const samples = new Float32Array(4 * 48000);
		addSines(samples, 48000, [
			{ hz: 440, amplitude: 0.2, decayPerSecond: 0, phase: 0 },
			{ hz: 442, amplitude: 0.2, decayPerSecond: 0, phase: 0 }
		]);
		const { timesS, levelDb } = shorelineDb(samples, 48000, 441);
		const at = (seconds: number): number => levelDb[timesS.findIndex((t) => t >= seconds - 1e-6)];
		expect(at(1)).toBeCloseTo(20 * Math.log10(0.4), 1);
		expect(at(1.5)).toBeCloseTo(20 * Math.log10(0.4), 1);
		expect(at(1.24)).toBeLessThan(-25);
		expect(timesS[timesS.length - 1]).toBeCloseTo(4, 3);
	});

	it('is nothing but floor in silence', () => {
		const { levelDb } = shorelineDb(new Float32Array(48000), 48000, 500);
		expect(levelDb.every((level) => level === -120)).toBe(true);
	});
});
