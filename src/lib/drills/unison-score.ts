import { toleranceCents } from '../acoustics/tolerances';
import { loudestPartial, unisonAtPartial, type UnisonPartial } from '../acoustics/unison';
import { ratioFromCents, type Hertz } from '../acoustics/units';
import { countEvents } from './trace';
import { tunedPiano } from './tuned-piano';
import type { RawTrial, UnisonTrialResult, UnisonTrialSpec } from './types';

/** Strength of a trial's blow, 0 to 1. */
export function velocityOf(spec: { velocityPercent: number }): number {
	return spec.velocityPercent / 100;
}

/** f_1 of the two strings, the fixed one first, with the moving one `cents` above it. */
export function unisonStringsHz(spec: UnisonTrialSpec, cents: number): readonly [Hertz, Hertz] {
	const fixedHz = tunedPiano(spec.piano).tuning.f1Hz(spec.midi);
	return [fixedHz, fixedHz * ratioFromCents(cents)];
}

/** The loudest coincident partial of the trial's note, where the beat is told. */
export function unisonPartial(spec: UnisonTrialSpec): number {
	return loudestPartial(tunedPiano(spec.piano).model, spec.midi, velocityOf(spec));
}

/** What the two strings do together at a partial, by default the judged one. */
export function unisonHeard(
	spec: UnisonTrialSpec,
	cents: number,
	partial: number = unisonPartial(spec)
): UnisonPartial {
	const { model } = tunedPiano(spec.piano);
	return unisonAtPartial(model, spec.midi, partial, unisonStringsHz(spec, cents));
}

/**
 * A unison as it was left: the difference of the strings' own f_1 in cents, and the beat at the
 * loudest partial, 0 where the strings are locked.
 */
export function scoreUnison(spec: UnisonTrialSpec, raw: RawTrial): UnisonTrialResult {
	const heard = unisonHeard(spec, raw.committedCents);
	const limitCents = toleranceCents(spec.toleranceSet, 'unison', spec.midi);
	return {
		drill: 'unison',
		index: spec.index,
		errorCents: raw.committedCents,
		rateHeardHz: heard.rateHz,
		locked: heard.rateHz === 0,
		partial: heard.partial,
		partialHz: heard.frequencyHz,
		toleranceCents: limitCents,
		inside: Math.abs(raw.committedCents) <= limitCents,
		strikes: countEvents(raw, 'strike', 'fixed', 'moving'),
		helps: countEvents(raw, 'help'),
		checks: 0,
		seconds: raw.committedAtMs / 1000
	};
}
