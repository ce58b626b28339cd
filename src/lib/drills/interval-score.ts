import { INTERVALS, signedBeatHz, type PartialPair } from '../acoustics/intervals';
import { partialHzFromF1 } from '../acoustics/stiff-string';
import { toleranceCents } from '../acoustics/tolerances';
import { ratioFromCents, type BeatsPerSecond, type Cents, type Hertz } from '../acoustics/units';
import { countEvents } from './trace';
import { tunedPiano } from './tuned-piano';
import type { IntervalTrialResult, IntervalTrialSpec, RawTrial } from './types';

/** The customary pair of partials of the trial's interval. */
export function intervalPair(spec: IntervalTrialSpec): PartialPair {
	return INTERVALS[spec.interval].pairs[0];
}

/** f_1 of the two notes, with the moving one `cents` above its target. */
export function intervalNotesHz(
	spec: IntervalTrialSpec,
	cents: number
): { lowHz: Hertz; highHz: Hertz } {
	const { tuning } = tunedPiano(spec.piano);
	const moved = ratioFromCents(cents);
	return {
		lowHz: tuning.f1Hz(spec.lowMidi) * (spec.moving === 'low' ? moved : 1),
		highHz: tuning.f1Hz(spec.highMidi) * (spec.moving === 'high' ? moved : 1)
	};
}

/** Signed beat of the customary pair with the moving note `cents` above its target; wide > 0. */
export function intervalBeatHz(spec: IntervalTrialSpec, cents: number): BeatsPerSecond {
	const { model } = tunedPiano(spec.piano);
	const { lowHz, highHz } = intervalNotesHz(spec, cents);
	return signedBeatHz({
		lowF1Hz: lowHz,
		lowInharmonicity: model.inharmonicity(spec.lowMidi),
		highF1Hz: highHz,
		highInharmonicity: model.inharmonicity(spec.highMidi),
		...intervalPair(spec)
	});
}

/** Where the coincident partials meet on the target: the fixed note's, which never moves. */
export function intervalPartialHz(spec: IntervalTrialSpec): Hertz {
	const { model, tuning } = tunedPiano(spec.piano);
	const { lowerPartial, upperPartial } = intervalPair(spec);
	const [partial, midi] =
		spec.moving === 'high' ? [lowerPartial, spec.lowMidi] : [upperPartial, spec.highMidi];
	return partialHzFromF1(partial, tuning.f1Hz(midi), model.inharmonicity(midi));
}

/** Tolerance of the note that moves, cents of its f_1. */
export function intervalToleranceCents(spec: IntervalTrialSpec): Cents {
	const midi = spec.moving === 'low' ? spec.lowMidi : spec.highMidi;
	return toleranceCents(spec.toleranceSet, 'interval', midi);
}

/** Signed beats at the ends of the tolerance, low to high, cut off where the interval is beatless. */
export function intervalToleranceHz(spec: IntervalTrialSpec): readonly [number, number] {
	const limit = intervalToleranceCents(spec);
	const ends = [intervalBeatHz(spec, -limit), intervalBeatHz(spec, limit)].sort((a, b) => a - b);
	const wide = intervalBeatHz(spec, 0) > 0;
	return wide ? [Math.max(0, ends[0]), ends[1]] : [ends[0], Math.min(0, ends[1])];
}

/**
 * An interval as it was left. Inside means within the tolerance of the moving note in cents *and* on
 * the proper side of beatless: a fifth left wide is a fault of the temperament however slow it beats.
 */
export function scoreInterval(spec: IntervalTrialSpec, raw: RawTrial): IntervalTrialResult {
	const beatHz = intervalBeatHz(spec, raw.committedCents);
	const targetHz = intervalBeatHz(spec, 0);
	const toleranceHz = intervalToleranceHz(spec);
	const limitCents = intervalToleranceCents(spec);
	const side = sideOf(beatHz, targetHz);
	const rateErrorHz = Math.abs(beatHz) - Math.abs(targetHz);
	return {
		drill: 'interval',
		index: spec.index,
		errorCents: raw.committedCents,
		rateHeardHz: Math.abs(beatHz),
		signedBeatHz: beatHz,
		targetSignedHz: targetHz,
		rateErrorHz,
		side,
		rightRateWrongSide: side === 'wrong' && withinMirrored(beatHz, toleranceHz),
		toleranceHz,
		toleranceCents: limitCents,
		inside: side === 'right' && Math.abs(raw.committedCents) <= limitCents,
		...intervalPair(spec),
		partialHz: intervalPartialHz(spec),
		strikes: countEvents(raw, 'strike', 'fixed', 'moving'),
		helps: countEvents(raw, 'help'),
		checks: countEvents(raw, 'check'),
		seconds: raw.committedAtMs / 1000
	};
}

/** Slower than a beat in 50 s nobody can say on which side of beatless an interval is. */
const BEATLESS_HZ = 0.02;

function sideOf(beatHz: number, targetHz: number): IntervalTrialResult['side'] {
	if (Math.abs(beatHz) < BEATLESS_HZ) return 'none';
	return Math.sign(beatHz) === Math.sign(targetHz) ? 'right' : 'wrong';
}

function withinMirrored(beatHz: number, [low, high]: readonly [number, number]): boolean {
	return -beatHz >= low && -beatHz <= high;
}
