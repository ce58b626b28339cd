import { describe, expect, it } from 'vitest';
import {
	centsBetween,
	equalTemperamentHz,
	isPianoMidi,
	midiFromNoteName,
	noteName,
	ratioFromCents
} from './units';

describe('note names', () => {
	it('reads sharps and flats and writes sharps', () => {
		expect(midiFromNoteName('A4')).toBe(69);
		expect(midiFromNoteName('A0')).toBe(21);
		expect(midiFromNoteName('C8')).toBe(108);
		expect(midiFromNoteName('Db3')).toBe(midiFromNoteName('C#3'));
		expect(midiFromNoteName('Cb4')).toBe(59);
		expect(midiFromNoteName('bb3')).toBe(58);
		expect(midiFromNoteName('B♭3')).toBe(58);
		expect(noteName(61)).toBe('C#4');
	});

	it('refuses what is no note', () => {
		for (const name of ['', 'H4', 'A', 'A##4', 'A10', '69', 'A4x', 'A-2']) {
			expect(midiFromNoteName(name)).toBeNull();
		}
	});

	it('goes there and back over the whole keyboard', () => {
		for (let midi = 21; midi <= 108; midi += 1) {
			expect(midiFromNoteName(noteName(midi))).toBe(midi);
			expect(isPianoMidi(midi)).toBe(true);
		}
		expect(isPianoMidi(20)).toBe(false);
		expect(isPianoMidi(60.5)).toBe(false);
	});
});

describe('pitch', () => {
	it('puts A4 on the fork and octaves at powers of two', () => {
		expect(equalTemperamentHz(69)).toBe(440);
		expect(equalTemperamentHz(57)).toBe(220);
		expect(equalTemperamentHz(81, 442)).toBe(884);
		expect(equalTemperamentHz(60)).toBeCloseTo(261.6256, 4);
	});

	it('cents and ratios undo each other', () => {
		expect(centsBetween(880, 440)).toBe(1200);
		expect(centsBetween(ratioFromCents(-37.5) * 100, 100)).toBeCloseTo(-37.5, 10);
	});
});
