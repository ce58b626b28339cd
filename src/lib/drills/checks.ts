import { checkNotes } from '../acoustics/check-notes';
import { intervalBetween, type IntervalId } from '../acoustics/intervals';
import { noteName, type Midi } from '../acoustics/units';
import type { IntervalTrialSpec } from './types';

export interface CheckPair {
	readonly lowMidi: Midi;
	readonly highMidi: Midi;
	readonly interval: IntervalId | null;
}

/** Two intervals to be heard one after the other; which of them beats faster is the check. */
export interface IntervalCheck {
	readonly checkMidi: Midi;
	readonly first: CheckPair;
	readonly second: CheckPair;
	/** What to listen for, with the notes named. */
	readonly sentence: string;
	/**
	 * True when the two rates differ by the judged interval's own beat, however wrong the check note
	 * is; false when the comparison leans on the check note being set.
	 */
	readonly exact: boolean;
}

function pair(lowMidi: Midi, highMidi: Midi): CheckPair {
	return { lowMidi, highMidi, interval: intervalBetween(lowMidi, highMidi) };
}

function named({ lowMidi, highMidi }: CheckPair): string {
	return `${noteName(lowMidi)}–${noteName(highMidi)}`;
}

/**
 * The check of a trial's interval, by the interval's usual check note (identities of
 * acoustics/check-notes). Fourth and fifth: the check note lies below and the two compared intervals
 * differ by the judged beat itself. Third and sixth beat too fast for that to be heard; there the
 * judged interval is compared with another from the same check note that beats a little slower or
 * faster by a slow fourth's or fifth's beat.
 */
export function intervalCheck(spec: IntervalTrialSpec): IntervalCheck {
	const { lowMidi, highMidi } = spec;
	const [{ checkMidi }] = checkNotes(lowMidi, highMidi);
	const checkLow = pair(checkMidi, lowMidi);
	const checkHigh = pair(checkMidi, highMidi);
	const judged = pair(lowMidi, highMidi);
	switch (spec.interval) {
		case 'fourth':
			return exactCheck(
				checkMidi,
				checkLow,
				checkHigh,
				'The fourth is wide when the sixth beats faster than the third'
			);
		case 'fifth':
			return exactCheck(
				checkMidi,
				checkLow,
				checkHigh,
				'The fifth is narrow when the tenth beats slower than the sixth'
			);
		case 'major-third':
			return leaningCheck(
				checkMidi,
				checkLow,
				judged,
				'The minor third should beat a little faster than the major third'
			);
		case 'major-sixth':
			return leaningCheck(
				checkMidi,
				pair(lowMidi, checkMidi),
				judged,
				'The sixth should beat a little faster than the third inside it'
			);
	}
}

function exactCheck(
	checkMidi: Midi,
	first: CheckPair,
	second: CheckPair,
	rule: string
): IntervalCheck {
	return {
		checkMidi,
		first,
		second,
		exact: true,
		sentence: sentence(checkMidi, first, second, rule)
	};
}

function leaningCheck(
	checkMidi: Midi,
	first: CheckPair,
	second: CheckPair,
	rule: string
): IntervalCheck {
	return {
		checkMidi,
		first,
		second,
		exact: false,
		sentence: sentence(checkMidi, first, second, rule)
	};
}

function sentence(checkMidi: Midi, first: CheckPair, second: CheckPair, rule: string): string {
	return `Check note ${noteName(checkMidi)}: first ${named(first)}, then ${named(second)}. ${rule}.`;
}
