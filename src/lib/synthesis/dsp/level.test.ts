import { describe, expect, it } from 'vitest';
import { PIANO_IDS, pianoModel, strikeLevel } from '../../acoustics/piano-model';
import { createRandom, integer, pick, uniform } from '../../acoustics/random';
import { equalTemperamentHz } from '../../acoustics/units';
import { detuned, renderVoices, voice } from '../testing/render-voices';
import { rootMeanSquare } from './noise';

const SMALLEST_NORMAL = 2 ** -126;

/** What is wrong with a list of samples, or null. */
function fault(samples: Float32Array): string | null {
	for (const x of samples) {
		if (Number.isNaN(x)) return 'not a number';
		if (Math.abs(x) > 1) return `beyond full scale: ${x}`;
		if (x !== 0 && Math.abs(x) < SMALLEST_NORMAL) return `denormal: ${x}`;
	}
	return null;
}

/** Loudest 100 ms of a strike, dB: a simple loudness. */
function loudestDb(samples: Float32Array, sampleRateHz: number): number {
	const length = sampleRateHz / 10;
	let loudest = 0;
	for (let from = 0; from + length <= samples.length; from += length / 10) {
		loudest = Math.max(loudest, rootMeanSquare(samples.subarray(from, from + length)));
	}
	return 20 * Math.log10(loudest);
}

describe('samples', () => {
	it('are numbers within ±1 and never denormal over a seeded mixture of strikes', () => {
		const random = createRandom(41);
		for (let trial = 0; trial < 40; trial += 1) {
			const voices = Array.from({ length: integer(random, 1, 3) }, (_, k) => {
				const midi = integer(random, 21, 108);
				const strings = Array.from({ length: integer(random, 1, 3) }, () =>
					uniform(random, -30, 30)
				);
				return voice(midi, detuned(equalTemperamentHz(midi), ...strings), {
					id: `${k}`,
					piano: pick(random, PIANO_IDS),
					velocity: uniform(random, 0, 1),
					coupling: random() < 0.8
				});
			});
			expect(fault(renderVoices(voices, 0.4, trial % 2 ? 44_100 : 48_000))).toBeNull();
		}
	});

	const chord = (lowest: number, piano: string, velocity: number) =>
		[0, 4, 7].map((above) =>
			voice(lowest + above, detuned(equalTemperamentHz(lowest + above), -0.5, 0, 0.7), {
				piano,
				velocity
			})
		);

	it.each([...PIANO_IDS])('three hard blows on trichords together stay within ±1, %s', (piano) => {
		for (const lowest of [48, 60, 72, 84, 100]) {
			expect(fault(renderVoices(chord(lowest, piano, 1), 0.5))).toBeNull();
		}
	});

	it('three firm blows on trichords together stay in the straight part of the limiter', () => {
		for (const lowest of [21, 45, 60, 84, 100]) {
			const samples = renderVoices(chord(lowest, 'short-upright', 0.7), 0.5);
			expect(Math.max(...samples.map(Math.abs))).toBeLessThan(0.8);
		}
	});

	it('stay clean down to silence', () => {
		expect(fault(renderVoices([voice(96, [2093, 2094])], 6))).toBeNull();
	});
});

describe('strike-to-strike level', () => {
	it('is even across the keyboard within ±0.75 dB, on every piano and at every force', () => {
		for (const velocity of [0.25, 0.6, 1]) {
			const levels: number[] = [];
			for (const piano of PIANO_IDS) {
				for (let midi = 21; midi <= 108; midi += 3) {
					const count = pianoModel(piano).stringCount(midi);
					const strings = Array.from({ length: count }, () => equalTemperamentHz(midi));
					const samples = renderVoices([voice(midi, strings, { piano, velocity })], 0.3);
					levels.push(loudestDb(samples, 48_000));
				}
			}
			const spread = Math.max(...levels) - Math.min(...levels);
			expect(spread, `velocity ${velocity}`).toBeLessThan(1.5);
		}
	});

	it('does not depend on how many strings sound', () => {
		for (const midi of [36, 57, 69, 88]) {
			const levels = [1, 2, 3].map((count) => {
				const strings = Array.from({ length: count }, () => equalTemperamentHz(midi));
				const samples = renderVoices([voice(midi, strings)], 0.1);
				return 20 * Math.log10(rootMeanSquare(samples) / strikeLevel(0.6));
			});
			for (const level of levels) expect(Math.abs(level)).toBeLessThan(0.5);
		}
	});

	it('follows the force of the blow', () => {
		const levels = [0.2, 0.5, 0.8, 1].map((velocity) =>
			loudestDb(renderVoices([voice(57, [220, 220, 220], { velocity })], 0.3), 48_000)
		);
		for (let k = 1; k < levels.length; k += 1) expect(levels[k]).toBeGreaterThan(levels[k - 1] + 1);
		expect(Math.max(...renderVoices([voice(57, [220], { velocity: 0 })], 0.1))).toBe(0);
	});
});
