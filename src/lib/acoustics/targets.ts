import { customaryPair, signedBeatHz, type PartialPair } from './intervals';
import type { PianoModel } from './piano-types';
import { KEYBOARD } from './piano-spec';
import { partialHzFromF1 } from './stiff-string';
import { DEFAULT_STYLE, TARGET_STYLES } from './target-styles';
import { solveStretch } from './target-solver';
import { TEMPERAMENT_IDS, temperamentOffsets } from './temperaments';
import {
	LOWEST_MIDI,
	STANDARD_A4_HZ,
	equalTemperamentHz,
	isPianoMidi,
	noteName,
	ratioFromCents,
	type BeatsPerSecond,
	type Cents,
	type Hertz,
	type Midi
} from './units';

export interface TargetOptions {
	/** Id of temperaments.ts; default 'equal'. */
	temperament?: string;
	/** Id of target-styles.ts; default 'four-two'. */
	style?: string;
	/** The fork, Hz; default 440. */
	a4Hz?: Hertz;
}

/** Where every f1 of a piano belongs. */
export interface TargetTuning {
	/** f1 above equal temperament at this fork, cents. */
	cents(midi: Midi): Cents;
	/** Target f1 of the note. */
	f1Hz(midi: Midi): Hertz;
}

/** What an interval does at one coincident pair. */
export interface IntervalBeat extends PartialPair {
	/** Rate heard, b/s, 0 upwards. */
	beatRateHz: BeatsPerSecond;
	/** f_high(q) − f_low(p), b/s, wide > 0. */
	signedHz: BeatsPerSecond;
	/** Mean frequency of the two partials. */
	coincidentHz: Hertz;
	direction: 'wide' | 'narrow';
}

/** Thrown for a temperament, style or fork that is not known; a one-line message. */
export class TargetError extends Error {
	override name = 'TargetError';
}

/**
 * Solves the target tuning of a piano. Equal temperament is fitted to the piano's stiffness; a
 * historical temperament is that solution plus its offsets (A = 0), so that its pure fifths miss
 * by up to 0.2 cents on the grands and 0.4 on the short upright.
 * Throws {@link TargetError} for an unknown temperament or style or a fork outside 200..900 Hz.
 */
export function solveTargets(piano: PianoModel, options: TargetOptions = {}): TargetTuning {
	const { temperament = 'equal', style = DEFAULT_STYLE, a4Hz = STANDARD_A4_HZ } = options;
	if (!Object.hasOwn(TARGET_STYLES, style)) {
		throw new TargetError(`unknown style "${style}": use ${Object.keys(TARGET_STYLES).join(', ')}`);
	}
	const offsets = temperamentOffsets(temperament);
	if (offsets === null) {
		throw new TargetError(
			`unknown temperament "${temperament}": use ${TEMPERAMENT_IDS.join(', ')}`
		);
	}
	if (!(a4Hz >= 200 && a4Hz <= 900)) throw new TargetError('A4 must lie between 200 and 900 Hz');
	const stretch = solveStretch(
		KEYBOARD.map((midi) => piano.inharmonicity(midi)),
		TARGET_STYLES[style]
	);
	return tuningFromCents((midi) => stretch[midi - LOWEST_MIDI] + offsets[midi % 12], a4Hz);
}

/** A tuning from cents of f1 above equal temperament; a note off the keyboard throws RangeError. */
export function tuningFromCents(
	centsOf: (midi: Midi) => Cents,
	a4Hz: Hertz = STANDARD_A4_HZ
): TargetTuning {
	const cents = (midi: Midi): Cents => {
		if (!isPianoMidi(midi)) throw new RangeError(`no such note on a piano: ${midi}`);
		return centsOf(midi);
	};
	return {
		cents,
		f1Hz: (midi) => equalTemperamentHz(midi, a4Hz) * ratioFromCents(cents(midi))
	};
}

/**
 * Beat of an interval of a tuned piano at one coincident pair, by default the customary one.
 * Throws RangeError when the interval has no customary pair and none is given.
 */
export function targetBeat(
	piano: PianoModel,
	tuning: TargetTuning,
	lowMidi: Midi,
	highMidi: Midi,
	pair: PartialPair | null = customaryPair(lowMidi, highMidi)
): IntervalBeat {
	if (pair === null) {
		throw new RangeError(
			`${noteName(lowMidi)}–${noteName(highMidi)} has no customary pair of partials`
		);
	}
	const { lowerPartial, upperPartial } = pair;
	const lowF1Hz = tuning.f1Hz(lowMidi);
	const lowInharmonicity = piano.inharmonicity(lowMidi);
	const signedHz = signedBeatHz({
		lowF1Hz,
		lowInharmonicity,
		highF1Hz: tuning.f1Hz(highMidi),
		highInharmonicity: piano.inharmonicity(highMidi),
		lowerPartial,
		upperPartial
	});
	return {
		lowerPartial,
		upperPartial,
		signedHz,
		beatRateHz: Math.abs(signedHz),
		coincidentHz: partialHzFromF1(lowerPartial, lowF1Hz, lowInharmonicity) + signedHz / 2,
		direction: signedHz < 0 ? 'narrow' : 'wide'
	};
}
