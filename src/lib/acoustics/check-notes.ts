import {
	intervalBetween,
	type IntervalId,
	type PartialPair,
	INTERVALS,
	customaryPair
} from './intervals';
import { isPianoMidi, type Midi } from './units';

type Role = 'low' | 'high' | 'check';

/** One of the two intervals that a check compares, by the notes' part in it. */
interface ComparedRoles extends PartialPair {
	lower: Role;
	upper: Role;
}

/**
 * A check note: a third note whose intervals with the two notes of the judged interval share a
 * partial, so that the judged beat equals one interval's signed beat minus ('difference') or plus
 * ('sum') the other's, exactly, for any stiffness and however wrong the check note is.
 */
interface CheckRule {
	judged: PartialPair;
	/** Semitones from the LOW note of the judged interval to the check note. */
	checkFromLow: number;
	combine: 'difference' | 'sum';
	compared: readonly [ComparedRoles, ComparedRoles];
}

/** An interval of a check, as notes. */
export interface ComparedInterval extends PartialPair {
	lowMidi: Midi;
	highMidi: Midi;
	/** Null when the trade has no name for it here. */
	interval: IntervalId | null;
}

/** A check note for a given interval. `judged` beat = compared[0] − or + compared[1], signed. */
export interface CheckNote {
	judged: PartialPair;
	checkMidi: Midi;
	combine: 'difference' | 'sum';
	compared: readonly [ComparedInterval, ComparedInterval];
	/** The common partial, as a partial of the check note. */
	checkPartial: number;
}

const compare = (
	lower: Role,
	upper: Role,
	lowerPartial: number,
	upperPartial: number
): ComparedRoles => ({ lower, upper, lowerPartial, upperPartial });

/** Check note below both: (check–high at c:q) − (check–low at c:p) = the judged p:q. */
function below(p: number, q: number, checkPartial: number, checkFromLow: number): CheckRule {
	return {
		judged: { lowerPartial: p, upperPartial: q },
		checkFromLow,
		combine: 'difference',
		compared: [compare('check', 'high', checkPartial, q), compare('check', 'low', checkPartial, p)]
	};
}

/** Check note between: (low–check at p:c) + (check–high at c:q) = the judged p:q. */
function between(p: number, q: number, checkPartial: number, checkFromLow: number): CheckRule {
	return {
		judged: { lowerPartial: p, upperPartial: q },
		checkFromLow,
		combine: 'sum',
		compared: [compare('low', 'check', p, checkPartial), compare('check', 'high', checkPartial, q)]
	};
}

/**
 * Checks of each interval, the usual one first. The octave tests are Coleman 2001 (octave types
 * and their tests); all are arithmetic identities.
 */
const RULES: Readonly<Partial<Record<IntervalId, readonly CheckRule[]>>> = {
	// Tenth against sixth; minor third plus major third inside for the 6:4 level.
	fifth: [below(3, 2, 5, -9), between(6, 4, 5, 3)],
	// Sixth against third from the same note below.
	fourth: [below(4, 3, 5, -4)],
	// Fifth (6:4) against minor third from the note a minor third below.
	'major-third': [below(5, 4, 6, -3), below(5, 4, 8, -8)],
	// Third plus fourth inside; octave (6:3) against minor third from an octave below.
	'major-sixth': [between(5, 3, 4, 4), below(5, 3, 6, -3)],
	// 4:2 tenth against third; 2:1 twelfth's third: fifth; 6:3, 8:4 and 10:5 inside.
	octave: [
		below(4, 2, 5, -4),
		below(2, 1, 3, -7),
		between(6, 3, 5, 3),
		between(8, 4, 5, 8),
		between(10, 5, 6, 9)
	],
	// Seventeenth against sixth.
	twelfth: [below(3, 1, 5, -9)],
	// Seventeenth against third.
	'double-octave': [below(4, 1, 5, -4)]
};

function resolve(rule: CheckRule, lowMidi: Midi, highMidi: Midi): CheckNote {
	const checkMidi = lowMidi + rule.checkFromLow;
	const midiOf: Record<Role, Midi> = { low: lowMidi, high: highMidi, check: checkMidi };
	const notes = ({ lower, upper, lowerPartial, upperPartial }: ComparedRoles) => ({
		lowMidi: midiOf[lower],
		highMidi: midiOf[upper],
		interval: intervalBetween(midiOf[lower], midiOf[upper]),
		lowerPartial,
		upperPartial
	});
	const [first, second] = rule.compared;
	return {
		judged: rule.judged,
		checkMidi,
		combine: rule.combine,
		compared: [notes(first), notes(second)],
		checkPartial: first.lower === 'check' ? first.lowerPartial : first.upperPartial
	};
}

/**
 * Check notes of an interval that lie on the keyboard, the usual one first; those that judge
 * `pair` (by default the customary one) before the others. Empty when there is none.
 */
export function checkNotes(
	lowMidi: Midi,
	highMidi: Midi,
	pair: PartialPair | null = customaryPair(lowMidi, highMidi)
): CheckNote[] {
	const id = intervalBetween(lowMidi, highMidi);
	const found = (id === null ? [] : (RULES[id] ?? []))
		.map((rule) => resolve(rule, lowMidi, highMidi))
		.filter((check) => isPianoMidi(check.checkMidi));
	const judgesPair = (check: CheckNote) => check.judged.lowerPartial === pair?.lowerPartial;
	return [...found.filter(judgesPair), ...found.filter((check) => !judgesPair(check))];
}

/** Intervals that have at least one check note. */
export const CHECKED_INTERVALS: readonly IntervalId[] = Object.values(INTERVALS)
	.map((interval) => interval.id)
	.filter((id) => RULES[id] !== undefined);
