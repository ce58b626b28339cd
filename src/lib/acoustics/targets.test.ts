import { describe, expect, it } from 'vitest';
import { PIANO_IDS, pianoFromSpec, pianoModel, type PianoModel } from './piano-model';
import { createRandom } from './random';
import { DEFAULT_STYLE, TARGET_STYLES } from './target-styles';
import {
	TargetError,
	solveTargets,
	targetBeat,
	tuningFromCents,
	type TargetTuning
} from './targets';
import { temperamentOffsets } from './temperaments';
import { randomPiano } from './testing/random-piano';
import { midiFromNoteName } from './units';

const KEYS = Array.from({ length: 88 }, (_, k) => 21 + k);
const midi = (name: string) => midiFromNoteName(name) as number;
const RANDOM_PIANOS = 200;

interface Solved {
	piano: PianoModel;
	tuning: TargetTuning;
}
const solved = (piano: PianoModel): Solved => ({ piano, tuning: solveTargets(piano) });

const shipped = PIANO_IDS.map((id) => solved(pianoModel(id)));
const random = createRandom(88);
const smooth = Array.from({ length: RANDOM_PIANOS }, () => solved(randomPiano(random)));
const scattered = Array.from({ length: RANDOM_PIANOS }, () => solved(randomPiano(random, 0.05)));

const pair = (lowerPartial: number, upperPartial: number) => ({ lowerPartial, upperPartial });

function worst(pianos: Solved[], value: (entry: Solved) => number): number {
	return Math.max(...pianos.map(value));
}

/** Largest 4:2 beat of the octaves F3–F4 to A3–A4. */
const octaveBeat = ({ piano, tuning }: Solved) =>
	Math.max(
		...[53, 54, 55, 56, 57].map(
			(low) => targetBeat(piano, tuning, low, low + 12, pair(4, 2)).beatRateHz
		)
	);

const RUNS = [
	['M3', 4, 5, 4, 48, 65],
	['M6', 9, 5, 3, 48, 62],
	['M10', 16, 5, 2, 41, 60],
	['M17', 28, 5, 1, 33, 57]
] as const;

/** Smallest step of a run of thirds, sixths, tenths and seventeenths from note to note, per cent. */
function smallestStep({ piano, tuning }: Solved): number {
	let smallest = Infinity;
	for (const [, semitones, p, q, first, last] of RUNS) {
		for (let low = first; low < last; low += 1) {
			const [here, next] = [low, low + 1].map(
				(note) => targetBeat(piano, tuning, note, note + semitones, pair(p, q)).signedHz
			);
			smallest = Math.min(smallest, 100 * (next / here - 1));
		}
	}
	return smallest;
}

/** Least narrow fifth and least wide fourth over lows F3–D4, b/s, as the smaller of both. */
function leastTempering({ piano, tuning }: Solved): number {
	let least = Infinity;
	for (let low = midi('F3'); low <= midi('D4'); low += 1) {
		least = Math.min(
			least,
			-targetBeat(piano, tuning, low, low + 7).signedHz,
			targetBeat(piano, tuning, low, low + 5).signedHz
		);
	}
	return least;
}

/** Largest 6:3 mismatch of octaves on A0–E2, cents. */
function bassMismatch({ piano, tuning }: Solved): number {
	let largest = 0;
	for (let low = midi('A0'); low <= midi('E2'); low += 1) {
		const beat = targetBeat(piano, tuning, low, low + 12, pair(6, 3));
		const lowerHz = beat.coincidentHz - beat.signedHz / 2;
		largest = Math.max(largest, 1200 * Math.abs(Math.log2(1 + beat.signedHz / lowerHz)));
	}
	return largest;
}

describe('targets without stiffness', () => {
	it.each(Object.keys(TARGET_STYLES))(
		'%s: every note at equal temperament, 1e-9 cents',
		(style) => {
			const tuning = solveTargets(pianoFromSpec('0'), { style });
			expect(Math.max(...KEYS.map((key) => Math.abs(tuning.cents(key))))).toBeLessThan(1e-9);
		}
	);

	it('gives the table of equal temperament: F3–A3 6.9294, F3–C4 −0.5912, F2–A4 3.4647', () => {
		const piano = pianoFromSpec('0');
		const tuning = solveTargets(piano);
		expect(targetBeat(piano, tuning, 53, 57).signedHz).toBeCloseTo(6.9294, 3);
		expect(targetBeat(piano, tuning, 53, 60).signedHz).toBeCloseTo(-0.5912, 3);
		expect(targetBeat(piano, tuning, 41, 69).signedHz).toBeCloseTo(3.4647, 3);
		const lower = solveTargets(piano, { a4Hz: 435 });
		expect(lower.f1Hz(69)).toBe(435);
		expect(targetBeat(piano, lower, 53, 57).signedHz).toBeCloseTo((6.9294 * 435) / 440, 3);
	});
});

describe('targets of the three pianos', () => {
	it('pin A4 exactly and stretch to both ends', () => {
		const ends = shipped.map(({ tuning }) => [tuning.cents(21), tuning.cents(108)].map(Math.round));
		expect(shipped.every(({ tuning }) => tuning.cents(69) === 0)).toBe(true);
		expect(ends).toEqual([
			[-26, 30],
			[-15, 28],
			[-9, 25]
		]);
	});

	it('medium grand: beats of the temperament on record for this solver', () => {
		const { piano, tuning } = shipped[1];
		const rate = (low: string, high: string) =>
			Number(targetBeat(piano, tuning, midi(low), midi(high)).beatRateHz.toFixed(2));
		expect([
			rate('F3', 'A3'),
			rate('F3', 'C4'),
			rate('F3', 'A#3'),
			rate('F3', 'D4'),
			rate('A3', 'C#4'),
			rate('A3', 'E4'),
			rate('A3', 'D4'),
			rate('C#4', 'F4'),
			rate('F4', 'A4')
		]).toEqual([6.76, 0.57, 0.71, 7.66, 8.52, 0.69, 0.9, 10.77, 13.39]);
	});

	it('stiffness slows thirds and speeds up F2–A4 against the handbook', () => {
		for (const { piano, tuning } of shipped) {
			const third = targetBeat(piano, tuning, 53, 57).beatRateHz / 6.9294;
			expect(third).toBeGreaterThan(0.94);
			expect(third).toBeLessThan(0.99);
			const seventeenth = targetBeat(piano, tuning, 41, 69).beatRateHz;
			expect(seventeenth).toBeGreaterThan(3.64);
			expect(seventeenth).toBeLessThan(3.74);
			expect(tuning.cents(57)).toBeLessThan(-1.1);
			expect(tuning.cents(57)).toBeGreaterThan(-1.8);
		}
	});

	it('contiguous thirds come out near 4:5', () => {
		for (const { piano, tuning } of shipped) {
			const rates = [53, 57, 61, 65].map(
				(low) => targetBeat(piano, tuning, low, low + 4).beatRateHz
			);
			for (let k = 1; k < 4; k += 1) {
				expect(rates[k] / rates[k - 1]).toBeGreaterThan(1.23);
				expect(rates[k] / rates[k - 1]).toBeLessThan(1.29);
			}
		}
	});
});

describe('bars, over the three pianos and 200 random ones', () => {
	const all = [...shipped, ...smooth];

	it('4:2 octaves of the temperament within 0.05 b/s on smooth stiffness', () => {
		expect(worst(all, octaveBeat)).toBeLessThanOrEqual(0.05);
	});

	it('4:2 octaves within 0.20 b/s with 5 % scatter in B', () => {
		expect(worst(scattered, octaveBeat)).toBeLessThanOrEqual(0.2);
	});

	it('thirds, sixths, tenths and seventeenths rise by at least 1.9 % a step', () => {
		expect(Math.min(...all.map(smallestStep))).toBeGreaterThanOrEqual(1.9);
		expect(Math.min(...scattered.map(smallestStep))).toBeGreaterThanOrEqual(1.9);
	});

	it('by at least 4 % on the grands', () => {
		expect(Math.min(...shipped.slice(1).map(smallestStep))).toBeGreaterThanOrEqual(4);
	});

	it('fifths stay narrow and fourths wide by at least 0.10 b/s in the temperament', () => {
		expect(Math.min(...all.map(leastTempering))).toBeGreaterThanOrEqual(0.1);
		expect(Math.min(...scattered.map(leastTempering))).toBeGreaterThanOrEqual(0.1);
	});

	it('6:3 octaves A0–E2 within 2 cents on smooth stiffness', () => {
		expect(worst(all, bassMismatch)).toBeLessThanOrEqual(2);
	});
});

describe('historical temperaments and styles', () => {
	it('add their offsets to the solution for equal temperament', () => {
		const { piano, tuning } = shipped[1];
		const offsets = temperamentOffsets('vallotti') as number[];
		const vallotti = solveTargets(piano, { temperament: 'vallotti' });
		for (const key of KEYS) {
			expect(vallotti.cents(key)).toBeCloseTo(tuning.cents(key) + offsets[key % 12], 9);
		}
	});

	it('miss pure fifths by at most 0.2 cents on grands and 0.4 on the short upright', () => {
		const pure: (readonly [number, number])[] = [
			[54, 61],
			[56, 63],
			[58, 65]
		];
		const limits = [0.4, 0.2, 0.2];
		shipped.forEach(({ piano }, k) => {
			const tuning = solveTargets(piano, { temperament: 'vallotti' });
			for (const [low, high] of pure) {
				const beat = targetBeat(piano, tuning, low, high);
				const cents = 1200 * Math.log2(1 + beat.signedHz / beat.coincidentHz);
				expect(Math.abs(cents)).toBeLessThanOrEqual(limits[k]);
			}
		});
	});

	it('each style makes its own octave type clean in the middle', () => {
		const { piano } = shipped[1];
		for (const [style, p] of [
			['two-one', 2],
			['four-two', 4],
			['six-three', 6]
		] as const) {
			const tuning = solveTargets(piano, { style });
			const beat = targetBeat(piano, tuning, 57, 69, pair(p, p / 2));
			expect(beat.beatRateHz, style).toBeLessThan(0.1);
		}
		expect(DEFAULT_STYLE).toBe('four-two');
	});

	it('refuses names that do not exist and notes off the keyboard', () => {
		const piano = pianoModel('medium-grand');
		expect(() => solveTargets(piano, { style: 'toString' })).toThrow(TargetError);
		expect(() => solveTargets(piano, { temperament: 'x' })).toThrow(TargetError);
		expect(() => solveTargets(piano, { a4Hz: Number.NaN })).toThrow(TargetError);
		const tuning = tuningFromCents(() => 0);
		expect(() => tuning.f1Hz(109)).toThrow(RangeError);
		expect(() => targetBeat(piano, tuning, 57, 58)).toThrow(RangeError);
	});
});
