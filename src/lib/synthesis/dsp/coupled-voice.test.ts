import { describe, expect, it } from 'vitest';
import { coupledModes, uncoupledOmega } from '../../acoustics/coupled-strings';
import { pianoModel } from '../../acoustics/piano-model';
import { partialHzFromF1 } from '../../acoustics/stiff-string';
import { equalTemperamentHz } from '../../acoustics/units';
import { detuned, renderVoices, voice } from '../testing/render-voices';
import { fitPoles } from '../testing/tone-fit';
import { ToneBank } from './tone-bank';
import { planFork, type VoicePlan } from './voice-plan';

const RATE = 48_000;

/** Two equal blows on two strings whose loss is all in the bridge: 8 dB/s for one alone. */
function workedPair(mistuningHz: number): VoicePlan {
	const plan = planFork(220, 0.6, RATE);
	return {
		...plan,
		key: 'worked',
		stretch: Float64Array.of(1),
		driveRe: Float64Array.of(0.2),
		driveIm: Float64Array.of(0),
		ownDecay: Float64Array.of(0),
		bridgeRe: Float64Array.of((8 * Math.LN10) / 20),
		bridgeIm: Float64Array.of(0),
		stringF1Hz: Float64Array.of(220, 220 + mistuningHz),
		stringGain: Float64Array.of(1, 1),
		stringSolo: Uint8Array.of(0, 0),
		stringMuted: Uint8Array.of(0, 0)
	};
}

function renderPlan(plan: VoicePlan, seconds: number): Float32Array {
	const bank = new ToneBank(RATE, 1);
	bank.strike(0, plan);
	const samples = new Float32Array(seconds * RATE);
	bank.process(samples);
	return samples;
}

/** Poles of a render around the pair, decays in dB/s. */
function measurePair(mistuningHz: number) {
	const samples = renderPlan(workedPair(mistuningHz), 6);
	const poles = fitPoles(samples, RATE, 220, 2, {
		fromSeconds: 0.02,
		toSeconds: 6,
		windowSeconds: 0.2,
		rateHz: 20
	});
	return {
		beatHz: poles[1].frequencyHz - poles[0].frequencyHz,
		decaysDb: poles.map((pole) => (pole.decayPerSecond * 20) / Math.LN10).sort((a, b) => b - a)
	};
}

describe('coupled strings, worked check (rows dec-010, dec-013 and dec-014 of decay-and-coupling.csv)', () => {
	it('0.2 Hz apart: no beat, decays of 13.849 and 2.151 dB/s', () => {
		const { beatHz, decaysDb } = measurePair(0.2);
		expect(beatHz).toBeLessThan(0.001);
		expect(decaysDb[0]).toBeCloseTo(13.849, 2);
		expect(decaysDb[1]).toBeCloseTo(2.151, 2);
	});

	it.each([
		[0.5, 0.405],
		[1, 0.9561]
	])('%f Hz apart: beats at %f b/s, both modes decay at 8 dB/s', (mistuningHz, beat) => {
		const { beatHz, decaysDb } = measurePair(mistuningHz);
		expect(Math.abs(beatHz - beat)).toBeLessThan(0.0002);
		expect(decaysDb[0]).toBeCloseTo(8, 2);
		expect(decaysDb[1]).toBeCloseTo(8, 2);
	});
});

/** Largest disagreement of rendered and modelled beats over partials 1, 2 and 4, in tolerances. */
function worstBeat(midi: number, cents: number[], sampleRateHz: number): number {
	const piano = pianoModel('medium-grand');
	const strings = detuned(equalTemperamentHz(midi), ...cents);
	const samples = renderVoices([voice(midi, strings)], 4, sampleRateHz);
	let worst = 0;
	for (const partial of [1, 2, 4]) {
		const hz = strings.map((f1) => partialHzFromF1(partial, f1, piano.inharmonicity(midi)));
		if (Math.max(...hz) > 15_000) continue;
		const tone = piano.tone(midi, partial, 0.6);
		const modes = coupledModes(
			hz.map((f) => uncoupledOmega(f, tone.bridgeReactancePerSecond)),
			tone.decayPerSecond,
			{ re: tone.bridgePerSecond, im: tone.bridgeReactancePerSecond }
		);
		const expected = modes
			.map((m) => m.frequencyRadPerSecond / (2 * Math.PI))
			.sort((a, b) => a - b);
		const fastest = Math.max(...modes.map((m) => m.decayPerSecond));
		const centreHz = hz.reduce((sum, f) => sum + f, 0) / hz.length;
		const poles = fitPoles(samples, sampleRateHz, centreHz, modes.length, {
			fromSeconds: 0.08,
			toSeconds: Math.min(4, 0.4 + 8 / fastest),
			windowSeconds: midi < 40 ? 0.45 : midi < 90 ? 0.2 : 0.02,
			rateHz: midi < 90 ? 50 : 400
		});
		for (let k = 1; k < expected.length; k += 1) {
			const beat = expected[k] - expected[k - 1];
			const error = poles[k].frequencyHz - poles[k - 1].frequencyHz - beat;
			worst = Math.max(worst, Math.abs(error) / Math.max(0.005, 0.001 * beat));
		}
	}
	return worst;
}

describe('rendered unison beats equal the eigenfrequency differences (0.005 b/s or 0.1 %)', () => {
	it.each([21, 28, 33, 40, 45, 53, 60, 69, 77, 84, 93, 105])('two strings, note %i', (midi) => {
		expect(worstBeat(midi, [0, 3], RATE)).toBeLessThan(1);
	});

	it.each([33, 57, 69, 88])('two strings, note %i at 44.1 kHz', (midi) => {
		expect(worstBeat(midi, [0, -6], 44_100)).toBeLessThan(1);
	});

	it.each([48, 60, 72, 84])('three strings, note %i', (midi) => {
		expect(worstBeat(midi, [-5, 0, 9], RATE)).toBeLessThan(1);
	});

	it('strings fifty cents apart at the top, where the splitting is coarsest', () => {
		expect(worstBeat(98, [-25, 25], RATE)).toBeLessThan(1);
	});
});

describe('a string sounding alone', () => {
	it.each([true, false])('has its stated f1 and decay (coupling %s)', (coupling) => {
		const samples = renderVoices([voice(57, [220.123], { coupling })], 3);
		const [pole] = fitPoles(samples, RATE, 220, 1, {
			fromSeconds: 0.08,
			toSeconds: 3,
			windowSeconds: 0.2,
			rateHz: 20
		});
		const tone = pianoModel('medium-grand').tone(57, 1, 0.6);
		expect(Math.abs(pole.frequencyHz - 220.123)).toBeLessThan(1e-4);
		expect(pole.decayPerSecond).toBeCloseTo(tone.decayPerSecond + tone.bridgePerSecond, 3);
	});

	it('keeps f1 with the others under the mute', () => {
		const samples = renderVoices([voice(57, [220, 221.5], { muted: [false, true] })], 3);
		const [pole] = fitPoles(samples, RATE, 220, 1, {
			fromSeconds: 0.4,
			toSeconds: 3,
			windowSeconds: 0.2,
			rateHz: 20
		});
		expect(Math.abs(pole.frequencyHz - 220)).toBeLessThan(1e-4);
	});

	it('does not couple when coupling is off: two strings 0.2 Hz apart beat at 0.2 b/s', () => {
		const samples = renderVoices([voice(57, [220, 220.2], { coupling: false })], 6);
		const poles = fitPoles(samples, RATE, 220, 2, {
			fromSeconds: 0.08,
			toSeconds: 6,
			windowSeconds: 0.2,
			rateHz: 20
		});
		expect(Math.abs(poles[1].frequencyHz - poles[0].frequencyHz - 0.2)).toBeLessThan(0.001);
	});

	it('beats by itself when it has a false beat', () => {
		const falseBeat = { string: 0, cents: 4, depth: 0.6 };
		const samples = renderVoices([voice(81, [880], { falseBeat })], 3);
		const poles = fitPoles(samples, RATE, 881, 2, {
			fromSeconds: 0.08,
			toSeconds: 2.5,
			windowSeconds: 0.1,
			rateHz: 50
		});
		const expected = 880 * (2 ** (4 / 1200) - 1);
		expect(Math.abs(poles[1].frequencyHz - poles[0].frequencyHz - expected)).toBeLessThan(0.005);
	});
});
