import type { TargetTuning } from './targets';
import { centsBetween, type Cents, type Hertz, type Midi } from './units';

/** A note set from an earlier one, with both pitches as they were at that moment. */
export interface Setting {
	midi: Midi;
	/** The note it was set from; null for the note that was set to the fork. */
	referenceMidi: Midi | null;
	f1Hz: Hertz;
	/** f1 of the reference WHEN this note was set (it may have moved since); null with the fork. */
	referenceF1Hz: Hertz | null;
}

/** Where the error of a setting comes from. total = own + propagated, exactly. */
export interface SettingError {
	midi: Midi;
	/** Departure from the target at that moment. */
	totalCents: Cents;
	/** The reference's own departure at that moment, handed on. */
	propagatedCents: Cents;
	/** What this setting added: the interval's departure from its target width. */
	ownCents: Cents;
}

export interface SlipFinding {
	/** The first setting in the order whose own error is above the limit; null if none is. */
	first: SettingError | null;
	/** The setting with the largest own error; null without settings. */
	largest: SettingError | null;
}

/** Share of an own error tolerated before it is a slip, when a student's scatter is not known. */
export const DEFAULT_SLIP_TOLERANCE_CENTS: Cents = 2;

/**
 * Splits each setting of a temperament into its own error and what it inherited. Stiffness
 * cancels: the own error is the same at every coincident pair.
 */
export function settingErrors(settings: readonly Setting[], targets: TargetTuning): SettingError[] {
	return settings.map(({ midi, referenceMidi, f1Hz, referenceF1Hz }) => {
		const totalCents = centsBetween(f1Hz, targets.f1Hz(midi));
		const propagatedCents =
			referenceMidi === null || referenceF1Hz === null
				? 0
				: centsBetween(referenceF1Hz, targets.f1Hz(referenceMidi));
		return { midi, totalCents, propagatedCents, ownCents: totalCents - propagatedCents };
	});
}

/**
 * Names the first slip: the first setting, in the order of work, whose own error exceeds the
 * tolerance by more than one standard deviation of its uncertainty.
 * @param toleranceCents about three times the student's own scatter
 * @param uncertaintyCents standard deviation of an own error as measured; 0 when exact
 */
export function findSlip(
	errors: readonly SettingError[],
	toleranceCents: Cents = DEFAULT_SLIP_TOLERANCE_CENTS,
	uncertaintyCents: Cents = 0
): SlipFinding {
	const size = (error: SettingError) => Math.abs(error.ownCents);
	return {
		first: errors.find((error) => size(error) > toleranceCents + uncertaintyCents) ?? null,
		largest: errors.reduce<SettingError | null>(
			(most, error) => (most === null || size(error) > size(most) ? error : most),
			null
		)
	};
}

/**
 * Score of a temperament, 0 to 100: 100 − 20 × the root mean square of the notes' errors in cents
 * with their mean removed (A4 against the fork is judged apart). 0 without notes.
 */
export function temperamentScore(totalCents: readonly Cents[]): number {
	if (totalCents.length === 0) return 0;
	const mean = totalCents.reduce((sum, cents) => sum + cents, 0) / totalCents.length;
	const square =
		totalCents.reduce((sum, cents) => sum + (cents - mean) ** 2, 0) / totalCents.length;
	return Math.max(0, 100 - 20 * Math.sqrt(square));
}
