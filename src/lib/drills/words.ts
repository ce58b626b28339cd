import { noteName } from '../acoustics/units';
import { INTERVALS } from '../acoustics/intervals';
import type {
	BlockResult,
	IntervalTrialResult,
	IntervalTrialSpec,
	TrialResult,
	TrialSpec
} from './types';

/** Notes stand as "C#4" in these sentences; the page draws the signs. */
export function movingNote(spec: TrialSpec): string {
	if (spec.drill === 'unison') return noteName(spec.midi);
	return noteName(spec.moving === 'low' ? spec.lowMidi : spec.highMidi);
}

/** The note that stays where it is. */
export function fixedNote(spec: TrialSpec): string {
	if (spec.drill === 'unison') return noteName(spec.midi);
	return noteName(spec.moving === 'low' ? spec.highMidi : spec.lowMidi);
}

/** "C4" or "A3–D4". */
export function trialName(spec: TrialSpec): string {
	if (spec.drill === 'unison') return noteName(spec.midi);
	return `${noteName(spec.lowMidi)}–${noteName(spec.highMidi)}`;
}

/** The task as a heading; says which string moves and, for an interval, on which side it belongs. */
export function taskTitle(spec: TrialSpec): string {
	if (spec.drill === 'unison')
		return `Bring the second string of ${noteName(spec.midi)} to the first`;
	const relation = spec.moving === 'high' ? 'above' : 'below';
	return `Set ${movingNote(spec)} a ${intervalName(spec)} ${relation} ${fixedNote(spec)}`;
}

/** What to do, in one or two sentences; no rate, no cents. */
export function taskText(spec: TrialSpec): string {
	if (spec.drill === 'unison') {
		return 'Strike, listen, and move the second string until the tone stands still and dies away as one.';
	}
	return `${movingNote(spec)} moves, ${fixedNote(spec)} is set. Pass through beatless, then open it ${properSide(spec)} until it beats like the target.`;
}

/** On which side of beatless the interval belongs in the temperament octave (targets computed). */
export function properSide(spec: IntervalTrialSpec): 'wide' | 'narrow' {
	return spec.interval === 'fifth' ? 'narrow' : 'wide';
}

export function intervalName(spec: IntervalTrialSpec): string {
	return INTERVALS[spec.interval].name;
}

/** "0.35 cents sharp", "1.00 cent flat", "not 0.01 cents off". */
export function centsWords(cents: number): string {
	const size = Math.abs(cents);
	if (size < 0.005) return 'not 0.01 cents off';
	return `${figure(size)} ${size === 1 ? 'cent' : 'cents'} ${cents > 0 ? 'sharp' : 'flat'}`;
}

/** "no beat" or "0.49 beats per second". */
export function rateWords(rateHz: number): string {
	if (rateHz < 0.005) return 'no beat';
	return `${figure(rateHz)} beats per second`;
}

/** The verdict as a sentence, for the heading of the reveal. */
export function verdictSentence(spec: TrialSpec, result: TrialResult): string {
	return result.drill === 'unison' || spec.drill === 'unison'
		? unisonVerdict(result)
		: intervalVerdict(spec, result);
}

function unisonVerdict(result: TrialResult): string {
	const place = result.inside ? 'Inside' : 'Outside';
	const heard =
		result.rateHeardHz === 0 ? 'locked, no beat' : `it beats ${rateAdverb(result.rateHeardHz)}`;
	return `${place}: ${centsWords(result.errorCents)}, ${heard}.`;
}

function rateAdverb(rateHz: number): string {
	return rateHz < 0.005 ? 'too slowly to count' : `${figure(rateHz)} times a second`;
}

function intervalVerdict(spec: IntervalTrialSpec, result: IntervalTrialResult): string {
	const proper = properSide(spec);
	const other = proper === 'wide' ? 'narrow' : 'wide';
	const name = intervalName(spec);
	if (result.rightRateWrongSide) {
		return `The right rate on the wrong side: this ${name} is ${other}, and it belongs ${proper}.`;
	}
	if (result.side === 'wrong') {
		return `Outside, on the wrong side: this ${name} is ${other}, and it belongs ${proper}.`;
	}
	if (result.side === 'none')
		return `Outside: this ${name} is beatless, and it belongs a little ${proper}.`;
	if (result.inside)
		return `Inside: this ${name} beats ${rateAdverb(result.rateHeardHz)}, ${proper}.`;
	const pace = result.rateErrorHz > 0 ? 'too fast' : 'too slow';
	return `Outside: this ${name} beats ${figure(Math.abs(result.rateErrorHz))} a second ${pace}.`;
}

/** The block in one sentence, for the heading of its summary. */
export function blockSentence(result: BlockResult): string {
	const median = `the middle of your errors is ${figure(result.medianAbsErrorCents)} cents`;
	if (result.inside === result.count) return `All ${result.count} inside; ${median}.`;
	if (result.inside === 0) return `None of ${result.count} inside yet; ${median}.`;
	return `${result.inside} of ${result.count} inside; ${median}.`;
}

/** What a block leans to, or null when it leans to neither side. */
export function leaningSentence(result: BlockResult): string | null {
	const sharp = result.trials.filter(({ errorCents }) => errorCents > 0).length;
	const flat = result.trials.filter(({ errorCents }) => errorCents < 0).length;
	// Eight of ten to one side come by chance in about one block in nine (binomial, 112/1024).
	const side = sharp >= 0.8 * result.count ? 'sharp' : flat >= 0.8 * result.count ? 'flat' : null;
	if (!side) return null;
	const many = side === 'sharp' ? sharp : flat;
	return `${many} of ${result.count} were left ${side}: see whether the next block leans the same way.`;
}

/** Two decimals, as on every screen. */
export function figure(value: number): string {
	return value.toFixed(2);
}
