import type { BeatsPerSecond, Cents, Hertz, Midi } from './units';

export type ToleranceSetId = 'learning' | 'working' | 'concert';
/**
 * What is judged: A4 against the fork, a note or an interval against its target, the strings of
 * one note against each other, or how far test blows move a string.
 */
export type ToleranceKind = 'fork' | 'interval' | 'unison' | 'blows';

/** Cents by register, as in the table of {@link TOLERANCE_SETS}. */
export interface ToleranceSet {
	id: ToleranceSetId;
	name: string;
	fork: Cents;
	/** Octaves 3 to 5, the temperament among them. */
	middle: Cents;
	/** Below C3, and octave 6. */
	outer: Cents;
	/** Octave 7 and C8. */
	top: Cents;
	/** Unisons in the middle. */
	unison: Cents;
	/** Moved by three blows. */
	blows: Cents;
}

/** Tolerance sets to start from, cents. Common practice, no source. */
export const TOLERANCE_SETS: Readonly<Record<ToleranceSetId, ToleranceSet>> = {
	learning: {
		id: 'learning',
		name: 'Learning',
		fork: 2,
		middle: 2,
		outer: 4,
		top: 8,
		unison: 1,
		blows: 1
	},
	working: {
		id: 'working',
		name: 'Working',
		fork: 1,
		middle: 1,
		outer: 2.5,
		top: 5.5,
		unison: 0.6,
		blows: 0.5
	},
	concert: {
		id: 'concert',
		name: 'Concert',
		fork: 0.5,
		middle: 0.5,
		outer: 1.5,
		top: 3,
		unison: 0.3,
		blows: 0.3
	}
};

function byRegister(set: ToleranceSet, midi: Midi): Cents {
	if (midi >= 96) return set.top;
	return midi < 48 || midi >= 84 ? set.outer : set.middle;
}

/**
 * Tolerance in cents of a set for what is judged at a note (for an interval: the note that is
 * tuned). Common practice gives unisons in the middle only; elsewhere they are widened here as
 * the notes are (our choice).
 */
export function toleranceCents(set: ToleranceSetId, kind: ToleranceKind, midi: Midi): Cents {
	const values = TOLERANCE_SETS[set];
	if (kind === 'fork') return values.fork;
	if (kind === 'blows') return values.blows;
	const register = byRegister(values, midi);
	return kind === 'interval' ? register : (values.unison * register) / values.middle;
}

/**
 * The same tolerance as beats at the partial where the interval is judged: a change of c cents
 * there is f·(2^(c/1200) − 1) b/s.
 * @param coincidentHz frequency of the coincident partial
 */
export function toleranceBeatsHz(cents: Cents, coincidentHz: Hertz): BeatsPerSecond {
	return coincidentHz * Math.expm1((cents * Math.LN2) / 1200);
}
