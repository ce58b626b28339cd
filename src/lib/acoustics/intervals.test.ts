import { describe, expect, it } from 'vitest';
import { referenceRows } from '../../../tests/support/reference-rows';
import { CHECKED_INTERVALS, checkNotes, type ComparedInterval } from './check-notes';
import {
	INTERVALS,
	coincidentPairs,
	customaryPair,
	intervalBetween,
	signedBeatHz
} from './intervals';
import { createRandom, uniform } from './random';
import { equalTemperamentHz, midiFromNoteName, noteName } from './units';

const midi = (name: string) => midiFromNoteName(name) as number;

function harmonicBeat(low: string, high: string, p: number, q: number, a4Hz = 440): number {
	return signedBeatHz({
		lowF1Hz: equalTemperamentHz(midi(low), a4Hz),
		lowInharmonicity: 0,
		highF1Hz: equalTemperamentHz(midi(high), a4Hz),
		highInharmonicity: 0,
		lowerPartial: p,
		upperPartial: q
	});
}

describe('beats of equal temperament without stiffness', () => {
	const table = referenceRows('beat-rates-equal-temperament').filter((row) =>
		row.source.startsWith('Teki')
	);

	it('has the fifty printed values of Teki et al. 2012, Table 1', () => {
		expect(table).toHaveLength(50);
	});

	it.each(table.map((row) => [row.row_id, `${row.lower}–${row.upper}`, row] as const))(
		'%s %s: the printed digit',
		(_id, _notes, row) => {
			const beat = harmonicBeat(
				row.lower,
				row.upper,
				Number(row.partial_lower),
				Number(row.partial_upper)
			);
			expect(Math.abs(Math.abs(beat) - Number(row.beats_per_s))).toBeLessThanOrEqual(0.05);
			expect(beat > 0 ? 'wide' : 'narrow').toBe(row.direction);
		}
	);

	it('equals every row computed from the definition, 1e-3', () => {
		const rows = referenceRows('beat-rates-equal-temperament').filter(
			(row) => row.basis === 'computed' && midiFromNoteName(row.lower) !== null
		);
		expect(rows.length).toBeGreaterThan(300);
		for (const row of rows) {
			const beat = harmonicBeat(
				row.lower,
				row.upper,
				Number(row.partial_lower),
				Number(row.partial_upper),
				Number(row.a4_hz)
			);
			expect(Math.abs(Math.abs(beat) - Number(row.beats_per_s)), row.row_id).toBeLessThan(1e-3);
		}
	});

	it.each([
		['F3', 'A3', 5, 4, 6.9294],
		['F3', 'C4', 3, 2, -0.5912],
		['F3', 'A#3', 4, 3, 0.7892],
		['A3', 'D4', 4, 3, 0.9943],
		['F3', 'D4', 5, 3, 7.9237],
		['F3', 'G#3', 6, 5, -9.423],
		['F2', 'A4', 5, 1, 3.4647]
	] as const)('%s–%s at %i:%i beats %d', (low, high, p, q, expected) => {
		expect(harmonicBeat(low, high, p, q)).toBeCloseTo(expected, 3);
		expect(harmonicBeat(low, high, p, q, 435)).toBeCloseTo((expected * 435) / 440, 3);
	});

	it('contiguous thirds grow by the third root of two', () => {
		const thirds = [
			['F3', 'A3', 6.929],
			['A3', 'C#4', 8.731],
			['C#4', 'F4', 11.0],
			['F4', 'A4', 13.859]
		] as const;
		thirds.forEach(([low, high, expected]) => {
			expect(Math.abs(harmonicBeat(low, high, 5, 4) - expected)).toBeLessThan(0.001);
		});
		const ratio = harmonicBeat('A3', 'C#4', 5, 4) / harmonicBeat('F3', 'A3', 5, 4);
		expect(ratio).toBeCloseTo(2 ** (1 / 3), 9);
	});
});

describe('coincident pairs', () => {
	it('lists the multiples of the ratio, the customary first', () => {
		expect(coincidentPairs(57, 64).map((pair) => pair.lowerPartial)).toEqual([3, 6, 9, 12, 15]);
		const octave = coincidentPairs(57, 69).map(
			(pair) => `${pair.lowerPartial}:${pair.upperPartial}`
		);
		expect(octave).toEqual(['4:2', '2:1', '6:3', '8:4', '10:5', '12:6', '14:7', '16:8']);
		expect(coincidentPairs(57, 58)).toEqual([]);
		expect(intervalBetween(57, 58)).toBeNull();
	});

	it('judges octaves by register and everything else by its one pair', () => {
		expect(customaryPair(33, 45)).toEqual({ lowerPartial: 6, upperPartial: 3 });
		expect(customaryPair(53, 65)).toEqual({ lowerPartial: 4, upperPartial: 2 });
		expect(customaryPair(72, 84)).toEqual({ lowerPartial: 2, upperPartial: 1 });
		expect(customaryPair(53, 57)).toEqual({ lowerPartial: 5, upperPartial: 4 });
	});

	it('every pair nearly meets: within 20 cents without stiffness', () => {
		for (const interval of Object.values(INTERVALS)) {
			for (const { lowerPartial, upperPartial } of interval.pairs) {
				const cents = 100 * interval.semitones + 1200 * Math.log2(upperPartial / lowerPartial);
				expect(Math.abs(cents), `${interval.id} ${lowerPartial}`).toBeLessThan(20);
			}
		}
	});
});

describe('check notes', () => {
	it('names the note and the two intervals of each drill interval', () => {
		const describeCheck = (low: string, high: string) => {
			const [check] = checkNotes(midi(low), midi(high));
			const name = (entry: ComparedInterval) =>
				`${noteName(entry.lowMidi)}–${noteName(entry.highMidi)} ${entry.interval}`;
			return [noteName(check.checkMidi), check.combine, ...check.compared.map(name)];
		};
		expect(describeCheck('F3', 'C4')).toEqual([
			'G#2',
			'difference',
			'G#2–C4 tenth',
			'G#2–F3 major-sixth'
		]);
		expect(describeCheck('A3', 'D4')).toEqual([
			'F3',
			'difference',
			'F3–D4 major-sixth',
			'F3–A3 major-third'
		]);
		expect(describeCheck('F3', 'A3')).toEqual([
			'D3',
			'difference',
			'D3–A3 fifth',
			'D3–F3 minor-third'
		]);
		expect(describeCheck('F3', 'D4')).toEqual(['A3', 'sum', 'F3–A3 major-third', 'A3–D4 fourth']);
		expect(describeCheck('A3', 'A4').slice(0, 2)).toEqual(['F3', 'difference']);
	});

	it('every compared interval has a name and shares the partial of the check note', () => {
		for (const id of CHECKED_INTERVALS) {
			const checks = checkNotes(57, 57 + INTERVALS[id].semitones);
			expect(checks.length).toBeGreaterThan(0);
			for (const check of checks) {
				for (const entry of check.compared) {
					expect(entry.interval, id).not.toBeNull();
					const ofCheck =
						entry.lowMidi === check.checkMidi ? entry.lowerPartial : entry.upperPartial;
					expect(ofCheck).toBe(check.checkPartial);
				}
			}
		}
	});

	it('is exact for any stiffness and any mistuning: 2,000 random sets, 1e-9 b/s', () => {
		const random = createRandom(31);
		let sets = 0;
		while (sets < 2000) {
			for (const id of CHECKED_INTERVALS) {
				const low = 45 + Math.floor(random() * 24);
				for (const check of checkNotes(low, low + INTERVALS[id].semitones)) {
					const f1Hz = new Map<number, number>();
					const inharmonicity = new Map<number, number>();
					for (const note of [low, low + INTERVALS[id].semitones, check.checkMidi]) {
						const detuned = 2 ** (uniform(random, -50, 50) / 1200);
						f1Hz.set(note, equalTemperamentHz(note) * detuned);
						inharmonicity.set(note, uniform(random, 0, 2e-3));
					}
					const beat = (lowMidi: number, highMidi: number, p: number, q: number) =>
						signedBeatHz({
							lowF1Hz: f1Hz.get(lowMidi) as number,
							lowInharmonicity: inharmonicity.get(lowMidi) as number,
							highF1Hz: f1Hz.get(highMidi) as number,
							highInharmonicity: inharmonicity.get(highMidi) as number,
							lowerPartial: p,
							upperPartial: q
						});
					const [first, second] = check.compared.map((entry) =>
						beat(entry.lowMidi, entry.highMidi, entry.lowerPartial, entry.upperPartial)
					);
					const combined = check.combine === 'difference' ? first - second : first + second;
					const judged = beat(
						low,
						low + INTERVALS[id].semitones,
						check.judged.lowerPartial,
						check.judged.upperPartial
					);
					expect(Math.abs(combined - judged)).toBeLessThan(1e-9);
					sets += 1;
				}
			}
		}
	});
});
