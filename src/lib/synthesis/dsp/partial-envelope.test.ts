import { describe, expect, it } from 'vitest';
import { unisonAtPartial } from '../../acoustics/unison';
import { pianoModel } from '../../acoustics/piano-model';
import { partialHzFromF1 } from '../../acoustics/stiff-string';
import { detuned, renderVoices, voice } from '../testing/render-voices';
import { bandEnvelope } from '../testing/tone-fit';
import { partialEnvelope } from './partial-envelope';
import { complexMatrix, matrixExponential } from './complex-matrix';

const RATE = 48_000;
const WINDOW_S = 0.1;

/** Level of a band of samples, dB of full scale, at the middle of each filter window. */
function measuredDb(samples: Float32Array, hz: number, rateHz: number): number[] {
	const options = { fromSeconds: 0, toSeconds: 4, windowSeconds: WINDOW_S, rateHz };
	const band = bandEnvelope(samples, RATE, hz, options);
	// A full-scale sine through the same filter is the reference.
	const sine = Float64Array.from({ length: 2 * WINDOW_S * RATE }, (_, t) =>
		Math.cos((2 * Math.PI * hz * t) / RATE)
	);
	const one = bandEnvelope(sine, RATE, hz, { ...options, toSeconds: 2 * WINDOW_S });
	const full = Math.hypot(one.re[0], one.im[0]);
	return Array.from(band.re, (re, k) => 20 * Math.log10(Math.hypot(re, band.im[k]) / full));
}

describe('envelope of a coincident partial, worked out from the model', () => {
	it('equals what a filter measures in the rendered unison', () => {
		const strings = detuned(220, 0, 4);
		const spec = voice(57, strings);
		const hz = partialHzFromF1(2, strings[0], pianoModel('medium-grand').inharmonicity(57));
		const model = partialEnvelope([spec], hz, 4, 401);
		const measured = measuredDb(renderVoices([spec], 4), hz, 100);
		// The filter's middle lies 0.05 s after its start; it blurs the bottom of each dip a little.
		const errors = Array.from({ length: 290 }, (_, k) => k + 10)
			.filter((k) => model.levelDb[k + 5] > model.levelDb[0] - 30)
			.map((k) => Math.abs(measured[k] - model.levelDb[k + 5]));
		expect(errors.length).toBeGreaterThan(100);
		expect(errors.reduce((sum, x) => sum + x, 0) / errors.length).toBeLessThan(0.15);
		expect(Math.max(...errors)).toBeLessThan(1.5);
	});

	it('equals what a filter measures in a rendered interval', () => {
		const voices = [voice(53, [174.6]), voice(57, [220.1])];
		const hz = partialHzFromF1(5, 174.6, pianoModel('medium-grand').inharmonicity(53));
		const model = partialEnvelope(voices, hz, 2, 201);
		const measured = measuredDb(renderVoices(voices, 4), hz, 100);
		const far = Array.from({ length: 150 }, (_, k) => k)
			.filter((k) => model.levelDb[k + 5] > model.levelDb[0] - 20 && k > 5)
			.map((k) => Math.abs(measured[k] - model.levelDb[k + 5]));
		expect(far.length).toBeGreaterThan(50);
		// A window of 0.1 s blurs the quick dips a little.
		expect(far.reduce((sum, x) => sum + x, 0) / far.length).toBeLessThan(1.5);
	});

	it('marks its quietest moments one beat apart', () => {
		const strings = detuned(220, 0, 8);
		const piano = pianoModel('medium-grand');
		const rate = unisonAtPartial(piano, 57, 2, strings).rateHz;
		const hz = partialHzFromF1(2, strings[0], piano.inharmonicity(57));
		const { quietestS } = partialEnvelope([voice(57, strings)], hz, 6, 300);
		expect(quietestS.length).toBeGreaterThan(5);
		for (let k = 1; k < quietestS.length; k += 1) {
			expect(Math.abs(quietestS[k] - quietestS[k - 1] - 1 / rate)).toBeLessThan(0.01);
		}
	});

	it('has no quiet moments where the strings are locked', () => {
		const { quietestS, levelDb } = partialEnvelope([voice(57, [220, 220])], 220, 8, 200);
		expect(quietestS).toEqual([]);
		expect(levelDb[199]).toBeLessThan(levelDb[0]);
	});

	it('leaves out a voice with no partial near, and is never below its floor', () => {
		const { levelDb, timesS } = partialEnvelope([voice(57, [220])], 300, 1, 11);
		expect(levelDb.every((db) => db === -120)).toBe(true);
		expect(timesS[10]).toBeCloseTo(1, 12);
	});
});

describe('matrix exponential', () => {
	it('is right where two eigenvalues meet and no eigenvector basis exists', () => {
		// exp([[a, 1], [0, a]]) = e^a·[[1, 1], [0, 1]].
		const m = complexMatrix(2);
		m.re.set([-0.3, 1, 0, -0.3]);
		m.im.set([2, 0, 0, 2]);
		const e = matrixExponential(m);
		const re = Math.exp(-0.3) * Math.cos(2);
		expect(e.re[0]).toBeCloseTo(re, 13);
		expect(e.re[1]).toBeCloseTo(re, 13);
		expect(e.re[2]).toBe(0);
		expect(e.im[3]).toBeCloseTo(Math.exp(-0.3) * Math.sin(2), 13);
	});
});
