import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { INTERVALS, signedBeatHz } from '../acoustics/intervals';
import { partialHzFromF1 } from '../acoustics/stiff-string';
import { DRILL_INTERVALS, DRILL_PIANOS, TOLERANCE_SET_IDS } from './catalogue';
import { intervalCheck, type CheckPair } from './checks';
import { DEFAULT_OPTIONS, generateBlock } from './generate';
import { intervalBeatHz, intervalNotesHz } from './interval-score';
import { generateOddOneTrial, oddOneStringsCents } from './odd-one';
import { scoreBlock, scoreTrial } from './score';
import { tunedPiano } from './tuned-piano';
import type { BlockOptions, IntervalTrialSpec, RawTrial, ScoredDrillId, TrialSpec } from './types';
import { unisonHeard } from './unison-score';
import { blockSentence, leaningSentence, verdictSentence } from './words';

const anySeed = fc.integer({ min: 0, max: 0xffffffff });
const anyDrill = fc.constantFrom<ScoredDrillId>('unison', 'interval');
const anyOptions: fc.Arbitrary<BlockOptions> = fc.record({
	toleranceSet: fc.constantFrom(...TOLERANCE_SET_IDS),
	piano: fc.constantFrom(...DRILL_PIANOS, 'varied' as const),
	intervals: fc.subarray([...DRILL_INTERVALS], { minLength: 1 })
});

/** A trial struck once and left at `cents`. */
function leftAt(spec: TrialSpec, cents: number): RawTrial {
	return {
		index: spec.index,
		startCents: spec.startCents,
		trace: [[100, 'strike', spec.startCents]],
		committedCents: cents,
		committedAtMs: 5000
	};
}

function intervalTrial(interval: IntervalTrialSpec['interval'], seed = 1): IntervalTrialSpec {
	const block = generateBlock('interval', seed, {
		...DEFAULT_OPTIONS.interval,
		intervals: [interval]
	});
	return block.trials[0] as IntervalTrialSpec;
}

describe('blocks', () => {
	it('are the same for the same seed and options, and plain JSON', () => {
		fc.assert(
			fc.property(anyDrill, anySeed, anyOptions, (drill, seed, options) => {
				const block = generateBlock(drill, seed, options);
				expect(generateBlock(drill, seed, options)).toEqual(block);
				expect(JSON.parse(JSON.stringify(block))).toEqual(block);
			})
		);
	});

	it('have ten trials, five from each side, well outside the tolerance', () => {
		fc.assert(
			fc.property(anyDrill, anySeed, (drill, seed) => {
				const { trials } = generateBlock(drill, seed);
				expect(trials).toHaveLength(10);
				expect(trials.filter(({ startCents }) => startCents > 0)).toHaveLength(5);
				for (const spec of trials) {
					expect(scoreTrial(spec, leftAt(spec, spec.startCents)).inside).toBe(false);
					expect(Math.round(spec.startCents * 100) / 100).toBe(spec.startCents);
				}
			})
		);
	});

	it('keep unisons in C3 to C6 and vary the note', () => {
		fc.assert(
			fc.property(anySeed, (seed) => {
				const notes = generateBlock('unison', seed).trials.map((t) =>
					t.drill === 'unison' ? t.midi : 0
				);
				expect(Math.min(...notes)).toBeGreaterThanOrEqual(48);
				expect(Math.max(...notes)).toBeLessThanOrEqual(84);
				expect(new Set(notes).size).toBe(10);
			})
		);
	});

	it('keep intervals in the temperament octave and use every one asked for', () => {
		fc.assert(
			fc.property(anySeed, anyOptions, (seed, options) => {
				const trials = generateBlock('interval', seed, options).trials as IntervalTrialSpec[];
				for (const trial of trials) {
					expect(trial.lowMidi).toBeGreaterThanOrEqual(53);
					expect(trial.highMidi).toBeLessThanOrEqual(65);
					expect(trial.highMidi - trial.lowMidi).toBe(INTERVALS[trial.interval].semitones);
				}
				expect(new Set(trials.map(({ interval }) => interval))).toEqual(new Set(options.intervals));
				expect(trials.filter(({ moving }) => moving === 'low')).toHaveLength(5);
			})
		);
	});

	it('differ between seeds', () => {
		const blocks = Array.from({ length: 200 }, (_, seed) =>
			JSON.stringify(generateBlock('unison', seed).trials)
		);
		expect(new Set(blocks).size).toBe(200);
	});

	it('refuse a seed or an engine version that is none', () => {
		expect(() => generateBlock('unison', -1)).toThrow(RangeError);
		expect(() => generateBlock('unison', 1.5)).toThrow(RangeError);
		expect(() => generateBlock('unison', 2 ** 32)).toThrow(RangeError);
		expect(() => generateBlock('unison', 1, DEFAULT_OPTIONS.unison, 999)).toThrow(RangeError);
	});
});

describe('a unison', () => {
	it('has the error that was left, and is inside exactly up to the tolerance', () => {
		const [spec] = generateBlock('unison', 5).trials;
		const { toleranceCents } = scoreTrial(spec, leftAt(spec, 0));
		expect(scoreTrial(spec, leftAt(spec, toleranceCents)).inside).toBe(true);
		expect(scoreTrial(spec, leftAt(spec, -toleranceCents)).inside).toBe(true);
		expect(scoreTrial(spec, leftAt(spec, toleranceCents + 0.01))).toMatchObject({
			inside: false,
			errorCents: toleranceCents + 0.01
		});
	});

	it('locks when the strings are close and beats as their partials differ when they are not', () => {
		for (const spec of generateBlock('unison', 9).trials) {
			if (spec.drill !== 'unison') continue;
			expect(unisonHeard(spec, 0).rateHz).toBe(0);
			expect(scoreTrial(spec, leftAt(spec, 0.1))).toMatchObject({ locked: true, rateHeardHz: 0 });
			const { model, tuning } = tunedPiano(spec.piano);
			const heard = unisonHeard(spec, 15);
			const f1Hz = tuning.f1Hz(spec.midi);
			const b = model.inharmonicity(spec.midi);
			const apartHz =
				partialHzFromF1(heard.partial, f1Hz * 2 ** (15 / 1200), b) -
				partialHzFromF1(heard.partial, f1Hz, b);
			// Far apart the bridge hardly draws them together: a little slower than the plain difference.
			expect(heard.rateHz).toBeLessThanOrEqual(apartHz * 1.001);
			expect(heard.rateHz).toBeGreaterThan(apartHz * 0.97);
		}
	});

	it('says what was left in one sentence', () => {
		const [spec] = generateBlock('unison', 5).trials;
		const sentence = (cents: number) =>
			verdictSentence(spec, scoreTrial(spec, leftAt(spec, cents)));
		expect(sentence(0.1)).toBe('Inside: 0.10 cents sharp, locked, no beat.');
		expect(sentence(-8)).toMatch(
			/^Outside: 8\.00 cents flat, it beats \d+\.\d\d times a second\.$/
		);
	});
});

describe('an interval', () => {
	it('has the beat rates worked out beforehand for the medium grand', () => {
		// design figures for the medium grand's target tuning, two decimals, b/s
		const rows: [IntervalTrialSpec['interval'], number, number, number][] = [
			['major-third', 53, 57, 6.76],
			['fifth', 53, 60, 0.57],
			['fourth', 53, 58, 0.71],
			['major-sixth', 53, 62, 7.66],
			['major-third', 57, 61, 8.52],
			['fifth', 57, 64, 0.69],
			['fourth', 57, 62, 0.9],
			['major-third', 61, 65, 10.77]
		];
		for (const [interval, lowMidi, highMidi, rateHz] of rows) {
			const spec: IntervalTrialSpec = {
				...intervalTrial(interval),
				piano: 'medium-grand',
				lowMidi,
				highMidi
			};
			// The figures are a prototype's, printed to two decimals.
			expect(Math.abs(Math.abs(intervalBeatHz(spec, 0)) - rateHz)).toBeLessThan(0.02);
		}
	});

	it('belongs narrow for a fifth and wide for the others, on every piano', () => {
		for (const interval of DRILL_INTERVALS) {
			for (let seed = 0; seed < 40; seed += 1) {
				const beatHz = intervalBeatHz(intervalTrial(interval, seed), 0);
				expect(Math.sign(beatHz)).toBe(interval === 'fifth' ? -1 : 1);
			}
		}
	});

	it('is inside on its target, whichever note moves', () => {
		fc.assert(
			fc.property(anySeed, (seed) => {
				for (const spec of generateBlock('interval', seed).trials) {
					const result = scoreTrial(spec, leftAt(spec, 0));
					expect(result).toMatchObject({ inside: true, side: 'right', errorCents: 0 });
				}
			}),
			{ numRuns: 30 }
		);
	});

	it('tells the right rate on the wrong side apart', () => {
		for (const interval of ['fifth', 'fourth'] as const) {
			const spec = intervalTrial(interval, 3);
			const target = intervalBeatHz(spec, 0);
			// The beat changes evenly with cents over so short a way.
			const perCent = intervalBeatHz(spec, 1) - target;
			const mirrored = Math.round((-2 * target * 100) / perCent) / 100;
			const result = scoreTrial(spec, leftAt(spec, mirrored));
			expect(result).toMatchObject({ inside: false, side: 'wrong', rightRateWrongSide: true });
			expect(verdictSentence(spec, result)).toContain('The right rate on the wrong side');
		}
	});

	it('is outside when it is left beatless, even where the tolerance in cents would reach', () => {
		const spec = intervalTrial('fifth', 3);
		const perCent = intervalBeatHz(spec, 1) - intervalBeatHz(spec, 0);
		const beatless = Math.round((-intervalBeatHz(spec, 0) * 100) / perCent) / 100;
		const result = scoreTrial(spec, leftAt(spec, beatless));
		expect(Math.abs(beatless)).toBeLessThanOrEqual(result.toleranceCents);
		expect(result).toMatchObject({ inside: false, side: 'none' });
	});

	it('is inside exactly where its beat lies in the stated range on the proper side', () => {
		fc.assert(
			fc.property(anySeed, fc.integer({ min: -400, max: 400 }), (seed, hundredth) => {
				const [spec] = generateBlock('interval', seed).trials;
				const result = scoreTrial(spec, leftAt(spec, hundredth / 100));
				if (result.drill !== 'interval' || result.side === 'none') return;
				const [low, high] = result.toleranceHz;
				const edge = Math.min(
					Math.abs(result.signedBeatHz - low),
					Math.abs(result.signedBeatHz - high)
				);
				if (edge < 1e-9) return;
				expect(result.inside).toBe(result.signedBeatHz > low && result.signedBeatHz < high);
			})
		);
	});
});

describe('checks', () => {
	const beat = (
		spec: IntervalTrialSpec,
		cents: number,
		{ lowMidi, highMidi, interval }: CheckPair
	) => {
		const { model, tuning } = tunedPiano(spec.piano);
		const moved = intervalNotesHz(spec, cents);
		const hz = (midi: number) =>
			midi === spec.lowMidi
				? moved.lowHz
				: midi === spec.highMidi
					? moved.highHz
					: tuning.f1Hz(midi);
		if (interval === null) throw new Error('a check uses intervals that have a name');
		return signedBeatHz({
			lowF1Hz: hz(lowMidi),
			lowInharmonicity: model.inharmonicity(lowMidi),
			highF1Hz: hz(highMidi),
			highInharmonicity: model.inharmonicity(highMidi),
			...INTERVALS[interval].pairs[0]
		});
	};

	it('hold in words on every piano at the target', () => {
		for (const interval of DRILL_INTERVALS) {
			for (let seed = 0; seed < 40; seed += 1) {
				const spec = intervalTrial(interval, seed);
				const { first, second } = intervalCheck(spec);
				const firstHz = Math.abs(beat(spec, 0, first));
				const secondHz = Math.abs(beat(spec, 0, second));
				const firstFaster = interval === 'fifth' || interval === 'major-third';
				expect(firstHz > secondHz).toBe(firstFaster);
			}
		}
	});

	it('turn round when a fourth or fifth is on the wrong side, by exactly its own beat', () => {
		for (const interval of ['fourth', 'fifth'] as const) {
			const spec = intervalTrial(interval, 11);
			const { first, second, exact } = intervalCheck(spec);
			expect(exact).toBe(true);
			for (const cents of [-3, -1, 0, 1, 3]) {
				const difference = beat(spec, cents, second) - beat(spec, cents, first);
				expect(Math.abs(difference - intervalBeatHz(spec, cents))).toBeLessThan(1e-9);
			}
		}
	});
});

describe('a block', () => {
	it('scores the median of the errors left and counts what was inside', () => {
		const block = generateBlock('unison', 21);
		const left = [0, 0.1, -0.2, 0.3, -0.4, 0.5, 3, -4, 5, -6];
		const result = scoreBlock(
			block,
			block.trials.map((spec, i) => leftAt(spec, left[i]))
		);
		expect(result.score).toBeCloseTo(0.45, 12);
		expect(result.medianAbsErrorCents).toBe(result.score);
		expect(result.count).toBe(10);
		expect(result.inside).toBe(6);
		expect(blockSentence(result)).toBe('6 of 10 inside; the middle of your errors is 0.45 cents.');
		expect(leaningSentence(result)).toBeNull();
	});

	it('says which way it leans', () => {
		const block = generateBlock('unison', 21);
		const result = scoreBlock(
			block,
			block.trials.map((spec) => leftAt(spec, -0.5))
		);
		expect(leaningSentence(result)).toContain('10 of 10 were left flat');
	});

	it('can be scored while it is under way', () => {
		const block = generateBlock('unison', 21);
		expect(scoreBlock(block, [leftAt(block.trials[0], 0.5)])).toMatchObject({
			count: 1,
			score: 0.5
		});
		expect(scoreBlock(block, []).score).toBeNaN();
	});
});

describe('the listening trial', () => {
	it('has one tone of three that beats, at an easy rate', () => {
		fc.assert(
			fc.property(anySeed, (seed) => {
				const trial = generateOddOneTrial(seed);
				expect(generateOddOneTrial(seed)).toEqual(trial);
				const beating = ([0, 1, 2] as const).filter(
					(tone) => oddOneStringsCents(trial, tone)[1] !== 0
				);
				expect(beating).toEqual([trial.answer]);
				const rateHz = 440 * 2 ** ((trial.midi - 69) / 12) * (2 ** (trial.spreadCents / 1200) - 1);
				expect(rateHz).toBeGreaterThan(1.55);
				expect(rateHz).toBeLessThan(3.1);
			})
		);
	});

	it('answers each of the three about equally often', () => {
		const counts = [0, 0, 0];
		for (let seed = 0; seed < 3000; seed += 1) counts[generateOddOneTrial(seed).answer] += 1;
		// Three standard deviations of a fair draw are 77.
		for (const count of counts) expect(Math.abs(count - 1000)).toBeLessThan(77);
	});
});
