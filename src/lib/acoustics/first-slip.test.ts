import { describe, expect, it } from 'vitest';
import { findSlip, settingErrors, temperamentScore, type Setting } from './first-slip';
import { pianoModel } from './piano-model';
import { createRandom, integer, normal, uniform } from './random';
import { solveTargets, targetBeat, tuningFromCents } from './targets';
import { midiFromNoteName, ratioFromCents } from './units';

const midi = (name: string) => midiFromNoteName(name) as number;
const piano = pianoModel('medium-grand');
const targets = solveTargets(piano);

/** An order of fourths and fifths from A3 within F3–F4 (made up for this test). */
const ORDER = [
	['A4', null],
	['A3', 'A4'],
	['D4', 'A3'],
	['G3', 'D4'],
	['C4', 'G3'],
	['F3', 'C4'],
	['A#3', 'F3'],
	['D#4', 'A#3'],
	['G#3', 'D#4'],
	['C#4', 'G#3'],
	['F#3', 'C#4'],
	['B3', 'F#3'],
	['E4', 'B3']
] as const;

/** A tuner who adds an own error to each setting; the reference keeps what it was given. */
function tune(ownCents: (step: number) => number): Setting[] {
	const f1Hz = new Map<number, number>();
	return ORDER.map(([note, reference], step) => {
		const own = ownCents(step);
		const key = midi(note);
		const from = reference === null ? null : midi(reference);
		const inherited = from === null ? 1 : (f1Hz.get(from) as number) / targets.f1Hz(from);
		f1Hz.set(key, targets.f1Hz(key) * inherited * ratioFromCents(own));
		return {
			midi: key,
			referenceMidi: from,
			f1Hz: f1Hz.get(key) as number,
			referenceF1Hz: from === null ? null : (f1Hz.get(from) as number)
		};
	});
}

describe('whose error is it', () => {
	it('own + propagated = total within 1e-9 cents, and own is what the tuner added', () => {
		const random = createRandom(3);
		for (let run = 0; run < 200; run += 1) {
			const added = ORDER.map(() => uniform(random, -8, 8));
			settingErrors(
				tune((step) => added[step]),
				targets
			).forEach((error, step) => {
				expect(Math.abs(error.ownCents + error.propagatedCents - error.totalCents)).toBeLessThan(
					1e-9
				);
				expect(Math.abs(error.ownCents - added[step])).toBeLessThan(1e-9);
			});
		}
	});

	it('is what the beat of the interval says, up to its sign', () => {
		const [a3, d4] = [midi('A3'), midi('D4')];
		const moved = tuningFromCents((key) => targets.cents(key) + (key === d4 ? 3 : 0));
		const width = (tuning: typeof targets) => {
			const beat = targetBeat(piano, tuning, a3, d4);
			return 1200 * Math.log2(1 + beat.signedHz / (beat.coincidentHz - beat.signedHz / 2));
		};
		expect(width(moved) - width(targets)).toBeCloseTo(3, 9);
	});

	it('judges by the pitches at the time: a reference moved later blames nobody else', () => {
		const settings = tune(() => 0);
		const c4 = settings.findIndex((entry) => entry.midi === midi('C4'));
		// Afterwards G3, from which C4 had been set, is moved by 5 cents: a setting of its own.
		const moved = { ...settings[3], f1Hz: settings[3].f1Hz * ratioFromCents(5) };
		const { first } = findSlip(settingErrors([...settings, moved], targets));
		expect(first?.midi).toBe(midi('G3'));
		expect(settingErrors([...settings, moved], targets)[c4].ownCents).toBeCloseTo(0, 9);
		// By final pitches alone C4 would have seemed out by as much.
		const misled = settingErrors([{ ...settings[c4], referenceF1Hz: moved.f1Hz }], targets);
		expect(misled[0].ownCents).toBeCloseTo(-5, 9);
	});

	it('hands an error on to every note set from it, as propagated', () => {
		const errors = settingErrors(
			tune((step) => (step === 3 ? 5 : 0)),
			targets
		);
		expect(findSlip(errors).first?.midi).toBe(midi('G3'));
		for (const later of errors.slice(4)) {
			expect(later.ownCents).toBeCloseTo(0, 9);
			expect(later.propagatedCents).toBeCloseTo(5, 9);
		}
	});
});

describe('first slip, 10,000 simulated temperaments, own scatter 0.5 cents, tolerance 2', () => {
	it('names a planted error of 3, 4 or 6 cents first in at least 97 %, rarely a wrong one', () => {
		const random = createRandom(20);
		for (const planted of [3, 4, 6]) {
			let right = 0;
			let named = 0;
			let trulyOut = 0;
			const runs = 10_000;
			for (let run = 0; run < runs; run += 1) {
				const at = integer(random, 1, ORDER.length - 1);
				const sign = random() < 0.5 ? -1 : 1;
				const added = ORDER.map(
					(_, step) => 0.5 * normal(random) + (step === at ? sign * planted : 0)
				);
				const { first } = findSlip(
					settingErrors(
						tune((step) => added[step]),
						targets
					)
				);
				if (first === null) continue;
				const step = ORDER.findIndex(([note]) => midi(note) === first.midi);
				named += 1;
				if (step === at) right += 1;
				if (Math.abs(added[step]) > 2) trulyOut += 1;
			}
			expect(right / runs, `${planted} cents`).toBeGreaterThanOrEqual(0.97);
			expect(trulyOut / named).toBeGreaterThanOrEqual(0.95);
		}
	});

	it('raises a false alarm in at most 3 % of clean ones', () => {
		const random = createRandom(21);
		let alarms = 0;
		for (let run = 0; run < 10_000; run += 1) {
			const { first } = findSlip(
				settingErrors(
					tune(() => 0.5 * normal(random)),
					targets
				)
			);
			if (first !== null) alarms += 1;
		}
		expect(alarms / 10_000).toBeLessThanOrEqual(0.03);
	});

	it('shows the largest own error beside the first', () => {
		const { first, largest } = findSlip(
			settingErrors(
				tune((step) => (step === 4 ? 3 : step === 8 ? -7 : 0)),
				targets
			)
		);
		expect(first?.midi).toBe(midi('C4'));
		expect(largest?.midi).toBe(midi('G#3'));
		expect(findSlip([]).largest).toBeNull();
		expect(
			findSlip(
				settingErrors(
					tune((step) => (step === 4 ? 2.5 : 0)),
					targets
				),
				2,
				1
			).first
		).toBe(null);
	});
});

describe('score of a temperament', () => {
	it('takes 20 points per cent of scatter, none for a common offset, and stops at 0', () => {
		expect(temperamentScore([3, 3, 3])).toBe(100);
		expect(temperamentScore([1, -1])).toBe(80);
		expect(temperamentScore([10, -10])).toBe(0);
		expect(temperamentScore([])).toBe(0);
	});
});
