import { describe, expect, it } from 'vitest';
import { coincidentPairs } from '../../acoustics/intervals';
import { equalTemperamentHz } from '../../acoustics/units';
import type { PairMeasure } from '../types';
import { measureClip } from './measure-clip';
import { partialOf } from './comb';
import { createNoise, createUniform, stiffTone } from '../testing/signals';

const RATE = 48000;

function limitOf(pair: PairMeasure): number {
	return Number(/faster than ([\d.]+)/.exec(pair.reason ?? '')?.[1]);
}

/** The first entry of each pair of partials: the strongest. */
function strongest(pairs: PairMeasure[]): PairMeasure[] {
	return pairs.filter(
		(pair, i) => pairs.findIndex((p) => p.lowerPartial === pair.lowerPartial) === i
	);
}

function stretched(f1Hz: number, inharmonicity: number): { f0Hz: number; inharmonicity: number } {
	return { f0Hz: f1Hz / Math.sqrt(1 + inharmonicity), inharmonicity };
}

describe('two strings', () => {
	it('beat at every partial within max(5 %, 0.1 b/s), or it is said that they cannot be measured', () => {
		const uniform = createUniform(71);
		let answered = 0;
		let asked = 0;
		for (const midi of [45, 57, 69]) {
			for (const rate of [0.3, 0.9, 2.5]) {
				for (const levelDb of [rate === 0.9 ? -12 : 0]) {
					const f1Hz = equalTemperamentHz(midi) * (1 + 0.004 * (uniform() - 0.5));
					const inharmonicity = 2e-4;
					const samples = stiffTone({
						sampleRateHz: RATE,
						seconds: 4,
						strings: [
							{ f1Hz, inharmonicity },
							{ f1Hz: f1Hz + rate, inharmonicity, level: 10 ** (levelDb / 20) }
						],
						seed: midi + 10 * rate,
						snrDb: 35,
						atSeconds: 0.1
					});
					const { pairs, notes } = measureClip(samples, RATE, { kind: 'unison', notes: [midi] });
					expect(notes[0].f1Hz).not.toBeNull();
					for (const pair of strongest(pairs)) {
						const n = pair.lowerPartial;
						const truth =
							partialOf(stretched(f1Hz + rate, inharmonicity), n) -
							partialOf(stretched(f1Hz, inharmonicity), n);
						if (truth > 19) continue;
						asked++;
						if (pair.verdict === 'still') expect(truth).toBeLessThanOrEqual(limitOf(pair));
						if (pair.verdict !== 'beating') continue;
						answered++;
						const tolerance = Math.max(0.05 * truth, 0.1);
						expect(Math.abs(pair.beatRateHz! - truth)).toBeLessThanOrEqual(tolerance);
						expect(pair.ci95Hz![0]).toBeLessThanOrEqual(pair.beatRateHz!);
					}
				}
			}
		}
		expect(answered / asked).toBeGreaterThan(0.9);
	});

	it('of one pitch are still', () => {
		const samples = stiffTone({
			sampleRateHz: RATE,
			seconds: 4,
			strings: [{ f1Hz: 220, inharmonicity: 2e-4 }],
			seed: 5,
			snrDb: 40
		});
		const { pairs } = measureClip(samples, RATE, { kind: 'unison', notes: [57] });
		expect(pairs).toHaveLength(8);
		for (const pair of pairs) {
			expect(pair.verdict).toBe('still');
			expect(pair.beatRateHz).toBeNull();
			expect(limitOf(pair)).toBeGreaterThan(0);
		}
	});

	it('too far apart to beat are not called still', () => {
		const strings = [220, 228].map((f1Hz) => ({ f1Hz, inharmonicity: 2e-4 }));
		const samples = stiffTone({ sampleRateHz: RATE, seconds: 3, strings, seed: 9, snrDb: 50 });
		const { pairs } = measureClip(samples, RATE, { kind: 'unison', notes: [57] });
		const high = pairs.filter(({ lowerPartial }) => lowerPartial >= 4);
		for (const pair of high) expect(pair.verdict).toBe('not-measurable');
	});
});

describe('intervals', () => {
	it('beat at the customary pair within max(5 %, 0.1 b/s), either side', () => {
		const uniform = createUniform(81);
		let answered = 0;
		let asked = 0;
		for (const semitones of [3, 4, 5, 7, 9, 16]) {
			for (const low of [53, 57]) {
				const high = low + semitones;
				const lowString = { f1Hz: equalTemperamentHz(low), inharmonicity: 2e-4 };
				const cents = 12 * uniform() - 6;
				const highString = {
					f1Hz: equalTemperamentHz(high) * 2 ** (cents / 1200),
					inharmonicity: 4e-4
				};
				const samples = stiffTone({
					sampleRateHz: RATE,
					seconds: 4,
					strings: [lowString, highString],
					seed: low + semitones,
					snrDb: 40
				});
				const { pairs } = measureClip(samples, RATE, { kind: 'interval', notes: [high, low] });
				const [customary] = coincidentPairs(low, high);
				expect(pairs[0]).toMatchObject(customary);
				const truth = Math.abs(
					partialOf(stretched(highString.f1Hz, 4e-4), customary.upperPartial) -
						partialOf(stretched(lowString.f1Hz, 2e-4), customary.lowerPartial)
				);
				asked++;
				expect(pairs[0].verdict).not.toBe('still');
				if (pairs[0].verdict !== 'beating') continue;
				answered++;
				expect(Math.abs(pairs[0].beatRateHz! - truth)).toBeLessThanOrEqual(
					Math.max(0.05 * truth, 0.1)
				);
			}
		}
		expect(answered / asked).toBeGreaterThan(0.8);
	});
});

describe('what cannot be measured', () => {
	it('noise alone, with or without a sudden beginning', () => {
		for (let seed = 1; seed <= 6; seed++) {
			const normal = createNoise(seed);
			const samples = Float32Array.from({ length: 4 * RATE }, (_, i) =>
				i < 4800 && seed % 2 === 0 ? 0 : 0.05 * normal()
			);
			for (const kind of ['unison', 'interval'] as const) {
				const notes = kind === 'unison' ? [57] : [57, 61];
				const result = measureClip(samples, RATE, { kind, notes });
				expect(result.pairs.length).toBeGreaterThan(0);
				for (const pair of result.pairs) {
					expect(pair.verdict).toBe('not-measurable');
					expect(pair.reason).toMatch(/\w/);
				}
				for (const note of result.notes) expect(note.f1Hz).toBeNull();
				expect(result.advice.length).toBeGreaterThan(0);
			}
		}
	});

	it('silence', () => {
		const result = measureClip(new Float32Array(RATE), RATE, { kind: 'note' });
		expect(result).toEqual({ notes: [], pairs: [], advice: ['No struck tone was heard.'] });
	});

	it('a tone driven into its limit', () => {
		const strings = [{ f1Hz: 220, inharmonicity: 2e-4 }];
		const samples = stiffTone({ sampleRateHz: RATE, seconds: 3, strings, seed: 2 }).map((value) =>
			Math.max(-0.15, Math.min(0.15, value))
		);
		const { pairs, advice } = measureClip(samples, RATE, { kind: 'note', notes: [57] });
		for (const pair of pairs) expect(pair.verdict).toBe('not-measurable');
		expect(advice.join(' ')).toMatch(/limit/);
	});

	it('a tone of a tenth of a second', () => {
		const strings = [{ f1Hz: 220, inharmonicity: 2e-4 }];
		const samples = stiffTone({ sampleRateHz: RATE, seconds: 0.3, strings, seed: 2 });
		const { pairs } = measureClip(samples.subarray(0, 7200), RATE, { kind: 'note', notes: [57] });
		for (const pair of pairs) expect(pair.verdict).toBe('not-measurable');
	});

	it('refuses the wrong number of notes', () => {
		const samples = new Float32Array(RATE);
		expect(() => measureClip(samples, RATE, { kind: 'interval', notes: [57] })).toThrow(RangeError);
		expect(() => measureClip(samples, RATE, { kind: 'unison', notes: [57, 59] })).toThrow(
			RangeError
		);
	});
});

describe('any sample rate', () => {
	it.each([22050, 32000, 44100, 88200, 96000])('%d Hz gives the same answer', (sampleRateHz) => {
		const strings = [220, 221.3].map((f1Hz) => ({ f1Hz, inharmonicity: 2e-4 }));
		const samples = stiffTone({ sampleRateHz, seconds: 3, strings, seed: 12, snrDb: 45 });
		const { pairs, notes } = measureClip(samples, sampleRateHz, { kind: 'unison', notes: [57] });
		expect(notes[0].note).toBe('A3');
		expect(pairs[0].verdict).toBe('beating');
		expect(Math.abs(pairs[0].beatRateHz! - 1.3)).toBeLessThan(0.05);
	});
});
