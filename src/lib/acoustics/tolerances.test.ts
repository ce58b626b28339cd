import { describe, expect, it } from 'vitest';
import { TOLERANCE_SETS, toleranceBeatsHz, toleranceCents } from './tolerances';
import { equalTemperamentHz, midiFromNoteName } from './units';

const midi = (name: string) => midiFromNoteName(name) as number;

describe('tolerance sets (common practice, no source)', () => {
	it.each([
		['B2', 4, 2.5, 1.5],
		['C3', 2, 1, 0.5],
		['B5', 2, 1, 0.5],
		['C6', 4, 2.5, 1.5],
		['B6', 4, 2.5, 1.5],
		['C7', 8, 5.5, 3],
		['C8', 8, 5.5, 3]
	])('%s by register', (note, learning, working, concert) => {
		const of = (set: keyof typeof TOLERANCE_SETS) => toleranceCents(set, 'interval', midi(note));
		expect([of('learning'), of('working'), of('concert')]).toEqual([learning, working, concert]);
	});

	it('fork, unisons and blows', () => {
		expect(toleranceCents('working', 'fork', 69)).toBe(1);
		expect(toleranceCents('working', 'unison', midi('A3'))).toBeCloseTo(0.6, 12);
		expect(toleranceCents('working', 'unison', midi('C6'))).toBeCloseTo(1.5, 12);
		expect(toleranceCents('concert', 'blows', 60)).toBe(0.3);
	});

	it('in beats: 0.6 cents at the fundamental is 0.06 at F3, 0.09 at C4, 0.15 at A4, 0.36 at C6', () => {
		const beats = ['F3', 'C4', 'A4', 'C6'].map((note) =>
			Number(toleranceBeatsHz(0.6, equalTemperamentHz(midi(note))).toFixed(2))
		);
		expect(beats).toEqual([0.06, 0.09, 0.15, 0.36]);
		expect(toleranceBeatsHz(1200, 440)).toBeCloseTo(440, 9);
	});
});
