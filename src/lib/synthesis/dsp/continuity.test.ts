import { describe, expect, it } from 'vitest';
import { bandEnvelope, fitPoles } from '../testing/tone-fit';
import { voice } from '../testing/render-voices';
import { CoupledVoice } from './coupled-voice';
import { ToneBank } from './tone-bank';
import { planFork, planVoice, type VoicePlan } from './voice-plan';

const RATE = 48_000;
const QUANTUM = 128;

/** Renders in render quanta, calling `act` before the quantum at each of the given times. */
function play(
	plan: VoicePlan,
	seconds: number,
	acts: Record<number, (bank: ToneBank) => void>
): Float32Array {
	const bank = new ToneBank(RATE, 4);
	const quanta = Math.round((seconds * RATE) / QUANTUM);
	const samples = new Float32Array(quanta * QUANTUM);
	const due = new Map(
		Object.entries(acts).map(([at, act]) => [Math.round((Number(at) * RATE) / QUANTUM), act])
	);
	bank.strike(0, plan);
	for (let q = 0; q < quanta; q += 1) {
		due.get(q)?.(bank);
		bank.process(samples.subarray(q * QUANTUM, (q + 1) * QUANTUM));
	}
	return samples;
}

function largestStep(samples: Float32Array, fromS: number, toS: number): number {
	let largest = 0;
	for (let t = Math.round(fromS * RATE) + 1; t < toS * RATE; t += 1) {
		largest = Math.max(largest, Math.abs(samples[t] - samples[t - 1]));
	}
	return largest;
}

/** Strongest sound around 12 kHz, where a fork has none, in dB under full scale. */
function splatterDb(samples: Float32Array, fromS: number, toS: number): number {
	const band = bandEnvelope(samples, RATE, 12_000, {
		fromSeconds: fromS,
		toSeconds: toS,
		windowSeconds: 0.004,
		rateHz: 2000
	});
	const size = band.re.map((re, k) => Math.hypot(re, band.im[k]));
	return 20 * Math.log10(Math.max(...size) / (0.19 * 0.004 * RATE));
}

const trichord = () => planVoice(voice(57, [219.8, 220, 220.4]), RATE);

describe('a string moved while it sounds', () => {
	it('makes no step larger than the tone itself has made since its attack', () => {
		const samples = play(trichord(), 1.2, {
			0.5: (bank) => bank.retune(0, 1, 222),
			0.6: (bank) => bank.retune(0, 1, 219),
			0.61: (bank) => bank.retune(0, 0, 221)
		});
		expect(largestStep(samples, 0.5, 0.7)).toBeLessThanOrEqual(largestStep(samples, 0.1, 0.5));
	});

	it('leaves no broadband click: a fork moved by half a semitone stays 100 dB clean', () => {
		const samples = play(planFork(440, 1, RATE), 1.6, { 1: (bank) => bank.retune(0, 0, 452) });
		expect(splatterDb(samples, 0.98, 1.06)).toBeLessThan(-100);
	});

	it('would show a phase jump by that measure', () => {
		const samples = play(planFork(440, 1, RATE), 1.6, {});
		const broken = samples.map((x, t) =>
			t < RATE ? x : samples[Math.min(t + 20, samples.length - 1)]
		);
		expect(splatterDb(broken, 0.98, 1.06)).toBeGreaterThan(-80);
	});

	it('is at its new pitch within 30 ms and stays there', () => {
		const samples = play(planFork(440, 1, RATE), 2.5, { 0.5: (bank) => bank.retune(0, 0, 441.5) });
		const [pole] = fitPoles(samples, RATE, 441, 1, {
			fromSeconds: 0.53,
			toSeconds: 2.4,
			windowSeconds: 0.1,
			rateHz: 50
		});
		expect(Math.abs(pole.frequencyHz - 441.5)).toBeLessThan(1e-4);
	});
});

describe('striking, damping, muting', () => {
	it('a strike rises smoothly: less than 1 % of its peak in the first 0.1 ms', () => {
		const samples = play(planFork(440, 1, RATE), 0.2, {});
		const peak = Math.max(...samples.map(Math.abs));
		expect(Math.max(...samples.subarray(0, 5).map(Math.abs))).toBeLessThan(0.01 * peak);
	});

	it('a second strike adds energy and does not click', () => {
		const again = planFork(440, 1, RATE);
		const samples = play(planFork(440, 1, RATE), 2, { 1: (bank) => bank.strike(0, again) });
		// The clang of a fork is itself above 2.7 kHz; a click would be far stronger at 12 kHz.
		expect(splatterDb(samples, 0.98, 1.06)).toBeLessThan(-80);
		const level = (from: number) =>
			Math.max(...samples.subarray(from * RATE, from * RATE + 4800).map(Math.abs));
		expect(level(1.1)).toBeGreaterThan(1.1 * level(0.85));
		expect(level(1.1)).toBeLessThan(2 * level(0.1));
	});

	it('the damper silences a note by 40 dB within half a second, without a step', () => {
		const samples = play(trichord(), 1.2, { 0.5: (bank) => bank.damp(0) });
		const energy = (from: number) =>
			samples.subarray(from * RATE, from * RATE + 2400).reduce((sum, x) => sum + x * x, 0);
		expect(10 * Math.log10(energy(1) / energy(0.45))).toBeLessThan(-40);
		expect(largestStep(samples, 0.5, 0.6)).toBeLessThanOrEqual(largestStep(samples, 0.35, 0.5));
	});

	it('stopping silences everything by 60 dB within 50 ms', () => {
		const samples = play(trichord(), 0.7, { 0.5: (bank) => bank.stopAll() });
		const after = samples.subarray(0.55 * RATE).reduce((top, x) => Math.max(top, Math.abs(x)), 0);
		const before = samples
			.subarray(0.45 * RATE, 0.5 * RATE)
			.reduce((top, x) => Math.max(top, Math.abs(x)), 0);
		expect(20 * Math.log10(after / before)).toBeLessThan(-60);
	});

	it('laying a mute on a string makes no step', () => {
		const samples = play(trichord(), 1, { 0.5: (bank) => bank.mute(0, 2, true) });
		expect(largestStep(samples, 0.5, 0.6)).toBeLessThanOrEqual(largestStep(samples, 0.35, 0.5));
	});

	it('a voice given away to another note hands over without a step', () => {
		const other = planVoice(voice(64, [329.6]), RATE);
		const samples = play(trichord(), 1, { 0.5: (bank) => bank.strike(0, other) });
		expect(largestStep(samples, 0.499, 0.501)).toBeLessThanOrEqual(largestStep(samples, 0.35, 0.5));
	});

	it('the level fades, never jumps', () => {
		const samples = play(planFork(440, 1, RATE), 0.7, { 0.5: (bank) => bank.setLevel(0) });
		expect(largestStep(samples, 0.499, 0.55)).toBeLessThanOrEqual(
			1.2 * largestStep(samples, 0.35, 0.5)
		);
		expect(Math.max(...samples.subarray(0.53 * RATE).map(Math.abs))).toBe(0);
	});
});

describe('a voice that has died away', () => {
	it('is silent, inactive and holds only zeros, so that no denormal numbers linger', () => {
		const note = new CoupledVoice(RATE);
		note.strike(planVoice(voice(100, [2637, 2638]), RATE));
		const out = new Float64Array(QUANTUM);
		note.damp();
		for (let q = 0; q < 1500 && note.active; q += 1) note.process(out, 0, QUANTUM);
		expect(note.active).toBe(false);
		expect([...note.stateRe, ...note.stateIm].every((x) => x === 0)).toBe(true);
	});
});
