import { figure, movingNote } from './words';
import type { IntervalTrialResult, TrialResult, TrialSpec, UnisonTrialResult } from './types';

/** One finding of a trial, as it is shown: a figure, its words, and where it lies in the tolerance. */
export interface TrialFact {
	/** Small line above. */
	readonly kick: string;
	readonly figure: string;
	/** Unit and side, in the text face. */
	readonly unit: string;
	readonly note: string;
	/** Value and tolerance in one unit, for the range picture; null where there is no picture. */
	readonly range: {
		readonly value: number;
		readonly tolerance: readonly [number, number];
		readonly domain: readonly [number, number];
		readonly tags: readonly [string, string];
		readonly unit: string;
	} | null;
}

/** What a trial left behind, the judged finding first. */
export function trialFacts(spec: TrialSpec, result: TrialResult): readonly TrialFact[] {
	return result.drill === 'unison' ? unisonFacts(result) : intervalFacts(spec, result);
}

function unisonFacts(result: UnisonTrialResult): TrialFact[] {
	return [
		{
			kick: 'Left between the strings',
			figure: figure(Math.abs(result.errorCents)),
			unit: `cents${sharpOrFlat(result.errorCents)}`,
			note: `Tolerance ${figure(result.toleranceCents)} cents either way, of the strings’ own first partials.`,
			range: centsRange(result)
		},
		{
			kick: `Heard at partial ${result.partial}, the loudest`,
			figure: result.rateHeardHz === 0 ? 'no beat' : figure(result.rateHeardHz),
			unit: result.rateHeardHz === 0 ? '' : 'beats per second',
			note: result.locked
				? 'Locked: the bridge draws strings so close into one pitch, and only the way the tone dies tells them apart.'
				: 'The strings pull at each other over the bridge, so they beat a little slower than they are apart.',
			range: null
		}
	];
}

function intervalFacts(spec: TrialSpec, result: IntervalTrialResult): TrialFact[] {
	const side = sideWord(result.signedBeatHz);
	const target = `${figure(Math.abs(result.targetSignedHz))} ${sideWord(result.targetSignedHz)}`;
	return [
		{
			kick: `Heard where partial ${result.lowerPartial} meets partial ${result.upperPartial}`,
			figure: figure(result.rateHeardHz),
			unit: `beats per second${result.side === 'none' ? '' : `, ${side}`}`,
			note: `Target ${target} on this piano. ${paceSentence(result)}`,
			range: rateRange(result)
		},
		{
			kick: `Left on ${movingNote(spec)}`,
			figure: figure(Math.abs(result.errorCents)),
			unit: `cents${sharpOrFlat(result.errorCents)}`,
			note: `Tolerance ${figure(result.toleranceCents)} cents either way, on the proper side of beatless.`,
			range: centsRange(result)
		}
	];
}

function paceSentence(result: IntervalTrialResult): string {
	if (result.side === 'wrong') return 'Yours lies on the other side of beatless.';
	if (Math.abs(result.rateErrorHz) < 0.005) return 'Yours is as fast.';
	const pace = result.rateErrorHz > 0 ? 'faster' : 'slower';
	return `Yours is ${figure(Math.abs(result.rateErrorHz))} ${pace}.`;
}

function centsRange({ errorCents, toleranceCents }: TrialResult): TrialFact['range'] {
	const reach = Math.max(3 * toleranceCents, Math.abs(errorCents) * 1.1);
	return {
		value: errorCents,
		tolerance: [-toleranceCents, toleranceCents],
		domain: [-reach, reach],
		tags: [`−${figure(toleranceCents)}`, `+${figure(toleranceCents)}`],
		unit: 'cents'
	};
}

/** Rates as they count towards the proper side: below 0 lies beyond beatless. */
function rateRange(result: IntervalTrialResult): TrialFact['range'] {
	const sign = result.targetSignedHz < 0 ? -1 : 1;
	const [a, b] = result.toleranceHz.map((hz) => hz * sign);
	const [low, high] = [Math.min(a, b) + 0, Math.max(a, b) + 0];
	const value = result.signedBeatHz * sign;
	const margin = Math.max(high - low, Math.abs(value - (value < low ? low : high))) * 0.7 + 0.1;
	return {
		value,
		tolerance: [low, high],
		domain: [Math.min(low, value) - margin, Math.max(high, value) + margin],
		tags: [figure(low), figure(high)],
		unit: 'beats per second'
	};
}

function sharpOrFlat(cents: number): string {
	if (Math.abs(cents) < 0.005) return '';
	return cents > 0 ? ' sharp' : ' flat';
}

function sideWord(signedHz: number): string {
	return signedHz < 0 ? 'narrow' : 'wide';
}
