import { describe, expect, it } from 'vitest';
import { bandEnvelope } from '../testing/tone-fit';
import { Knock } from './knock';
import { limit } from './limiter';
import { makeNoise, rootMeanSquare } from './noise';
import { encodeWav } from './wav';

describe('limiter', () => {
	it('is a wire up to 0.8, rises throughout and never reaches full scale', () => {
		expect(limit(0.5)).toBe(0.5);
		expect(limit(-0.8)).toBe(-0.8);
		const inputs = Array.from({ length: 8001 }, (_, k) => -40 + k / 100);
		const outputs = inputs.map(limit);
		expect(outputs.every((y, k) => k === 0 || y >= outputs[k - 1])).toBe(true);
		expect(Math.max(...outputs.map(Math.abs))).toBeLessThanOrEqual(0.999);
	});

	it('writes nothing that is not a number and nothing too small to matter', () => {
		expect(limit(Number.NaN)).toBe(0);
		expect(limit(1e-30)).toBe(0);
		expect(limit(Infinity)).toBeLessThan(1);
	});
});

describe('knock', () => {
	it('is short, the same for the same seed, and another for another', () => {
		const knock = (seed: number) => {
			const source = new Knock(48_000);
			const out = new Float64Array(9600);
			source.start(0.1, seed);
			source.add(out, 0, out.length);
			return out;
		};
		const first = knock(5);
		expect(knock(5).every((x, t) => x === first[t])).toBe(true);
		expect(knock(6).some((x, t) => x !== first[t])).toBe(true);
		const early = rootMeanSquare(first.subarray(0, 960));
		const late = rootMeanSquare(first.subarray(4800, 5760));
		expect(early).toBeGreaterThan(0.005);
		expect(20 * Math.log10(late / early)).toBeLessThan(-50);
	});
});

describe('noise', () => {
	it.each(['white', 'pink'] as const)(
		'%s has the level asked for and follows its seed',
		(colour) => {
			const noise = makeNoise(20_000, 0.01, colour, 3);
			expect(rootMeanSquare(noise)).toBeCloseTo(0.01, 12);
			expect(makeNoise(20_000, 0.01, colour, 3)).toEqual(noise);
			expect(makeNoise(20_000, 0.01, colour, 4)).not.toEqual(noise);
		}
	);

	it.each([
		['white', 0],
		['pink', -9.03]
	] as const)('%s has its slope: %f dB over three octaves', (colour, slopeDb) => {
		const noise = makeNoise(240_000, 0.1, colour, 9);
		const power = (hz: number) => {
			const band = bandEnvelope(noise, 48_000, hz, {
				fromSeconds: 0,
				toSeconds: 5,
				windowSeconds: 0.02,
				rateHz: 120
			});
			return band.re.reduce((sum, re, k) => sum + re * re + band.im[k] ** 2, 0);
		};
		expect(Math.abs(10 * Math.log10(power(4000) / power(500)) - slopeDb)).toBeLessThan(1.5);
	});
});

describe('WAV files', () => {
	const samples = Float32Array.of(0, 0.5, -1, 1.5);

	it('carry floats unchanged, with the fact chunk that the format asks for', () => {
		const bytes = encodeWav(samples, 44_100);
		const view = new DataView(bytes.buffer);
		expect(new TextDecoder().decode(bytes.subarray(0, 4))).toBe('RIFF');
		expect(view.getUint32(4, true)).toBe(bytes.length - 8);
		expect(view.getUint16(20, true)).toBe(3);
		expect(view.getUint32(24, true)).toBe(44_100);
		expect(new TextDecoder().decode(bytes.subarray(38, 42))).toBe('fact');
		expect(view.getUint32(54, true)).toBe(16);
		expect(view.getFloat32(58 + 4, true)).toBe(0.5);
	});

	it('carry 16 bits, held at the ends', () => {
		const bytes = encodeWav(samples, 48_000, 'int16');
		const view = new DataView(bytes.buffer);
		expect(view.getUint16(20, true)).toBe(1);
		expect(bytes.length).toBe(44 + 8);
		expect([0, 1, 2, 3].map((t) => view.getInt16(44 + 2 * t, true))).toEqual([
			0, 16384, -32767, 32767
		]);
	});
});
