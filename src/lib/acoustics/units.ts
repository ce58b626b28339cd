/** Frequency in hertz. */
export type Hertz = number;
/** Musical interval in cents, 1200·log2 of a frequency ratio. */
export type Cents = number;
/** Time in seconds. */
export type Seconds = number;
/** Beats per second, written b/s. */
export type BeatsPerSecond = number;
/** MIDI note number, 21 (A0) to 108 (C8) on a piano; A4 = 69. */
export type Midi = number;

/** Lowest note of the keyboard, A0. */
export const LOWEST_MIDI: Midi = 21;
/** Highest note of the keyboard, C8. */
export const HIGHEST_MIDI: Midi = 108;
/** A4, the note that is set to the fork. */
export const A4_MIDI: Midi = 69;
/** The usual fork (ISO 16:1975). */
export const STANDARD_A4_HZ: Hertz = 440;
/** 20·log10(e): a decay of 1/s in amplitude is this many dB/s. */
export const DB_PER_NEPER = 20 / Math.LN10;

const NOTE_NAMES = ['C', 'C#', 'D', 'D#', 'E', 'F', 'F#', 'G', 'G#', 'A', 'A#', 'B'] as const;
const LETTER_SEMITONES: Record<string, number> = { C: 0, D: 2, E: 4, F: 5, G: 7, A: 9, B: 11 };

/** Interval from `referenceHz` up to `frequencyHz` in cents; negative when below. Both above 0 Hz. */
export function centsBetween(frequencyHz: Hertz, referenceHz: Hertz): Cents {
	return 1200 * Math.log2(frequencyHz / referenceHz);
}

/** Frequency ratio of an interval in cents: 2^(c/1200). */
export function ratioFromCents(cents: Cents): number {
	return 2 ** (cents / 1200);
}

/**
 * MIDI number of a note name: letter, optional `#` or `b` (also ♯, ♭), octave -1 to 9;
 * "A4" = 69, "Db3" = "C#3" = 49. Upper or lower case letter. Returns null for anything else.
 */
export function midiFromNoteName(name: string): Midi | null {
	const match = /^([A-Ga-g])([#♯b♭]?)(-1|\d)$/.exec(name.trim());
	if (!match) return null;
	const semitone = LETTER_SEMITONES[match[1].toUpperCase()];
	const accidental = match[2] === '' ? 0 : match[2] === '#' || match[2] === '♯' ? 1 : -1;
	return 12 * (Number(match[3]) + 1) + semitone + accidental;
}

/** Name of a MIDI note with ASCII sharps, e.g. 61 → "C#4". The number is rounded first. */
export function noteName(midi: Midi): string {
	const whole = Math.round(midi);
	const pitchClass = ((whole % 12) + 12) % 12;
	return `${NOTE_NAMES[pitchClass]}${Math.floor(whole / 12) - 1}`;
}

/** Frequency of a note in twelve-tone equal temperament. */
export function equalTemperamentHz(midi: Midi, a4Hz: Hertz = STANDARD_A4_HZ): Hertz {
	return a4Hz * 2 ** ((midi - A4_MIDI) / 12);
}

/** True for a whole number from A0 to C8. */
export function isPianoMidi(midi: unknown): midi is Midi {
	return (
		typeof midi === 'number' &&
		Number.isInteger(midi) &&
		midi >= LOWEST_MIDI &&
		midi <= HIGHEST_MIDI
	);
}
