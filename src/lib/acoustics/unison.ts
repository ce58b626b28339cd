import { coupledModes, rateHeardHz, uncoupledOmega, type CoupledMode } from './coupled-strings';
import { HIGHEST_PARTIAL, type PianoModel } from './piano-types';
import { partialHzFromF1 } from './stiff-string';
import type { BeatsPerSecond, Hertz, Midi } from './units';

export interface UnisonPartial {
	partial: number;
	/** Mean of the strings' own frequencies at this partial. */
	frequencyHz: Hertz;
	modes: CoupledMode[];
	/** Beat heard, b/s; 0 when the strings are locked. */
	rateHz: BeatsPerSecond;
	/** True when the strings differ yet do not beat here. */
	locked: boolean;
}

/** The partial that is loudest at the strike: there a unison of this note is heard first. */
export function loudestPartial(piano: PianoModel, midi: Midi, velocity = 0.6): number {
	let loudest = 1;
	for (let n = 2; n <= HIGHEST_PARTIAL; n += 1) {
		if (piano.tone(midi, n, velocity).amplitude > piano.tone(midi, loudest, velocity).amplitude) {
			loudest = n;
		}
	}
	return loudest;
}

/**
 * What one to three strings of a note do together at one partial.
 * @param stringsF1Hz each string's own f1, as it sounds with the others muted
 */
export function unisonAtPartial(
	piano: PianoModel,
	midi: Midi,
	partial: number,
	stringsF1Hz: readonly Hertz[]
): UnisonPartial {
	const tone = piano.tone(midi, partial, 0.6);
	const frequencies = stringsF1Hz.map((f1Hz) =>
		partialHzFromF1(partial, f1Hz, piano.inharmonicity(midi))
	);
	const modes = coupledModes(
		frequencies.map((hz) => uncoupledOmega(hz, tone.bridgeReactancePerSecond)),
		tone.decayPerSecond,
		{ re: tone.bridgePerSecond, im: tone.bridgeReactancePerSecond }
	);
	const rateHz = rateHeardHz(modes);
	const differ = frequencies.some((hz) => hz !== frequencies[0]);
	return {
		partial,
		frequencyHz: frequencies.reduce((sum, hz) => sum + hz, 0) / frequencies.length,
		modes,
		rateHz,
		locked: differ && rateHz === 0
	};
}
