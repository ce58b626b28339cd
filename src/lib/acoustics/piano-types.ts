import type { Midi } from './units';

/** One partial of one string of a note, as the hammer leaves it. */
export interface PartialTone {
	/**
	 * Linear level of this partial of ONE string at the strike, 0 upwards. Already normalised: all
	 * strings of the note at this velocity, struck together, give the same level on every note
	 * (see `strikeLevel`), and the sum of all partials of all strings stays well below 1.
	 */
	amplitude: number;
	/** γ_n, the string's own loss, 1/s in amplitude. */
	decayPerSecond: number;
	/** Re η_n, loss through the bridge, 1/s in amplitude; a lone string decays at γ_n + Re η_n. */
	bridgePerSecond: number;
	/**
	 * Im η_n, 1/s: the bridge also pulls the pitch. A string's stated frequency is the one at which
	 * it sounds ALONE, so its uncoupled angular frequency is 2π·f_n + Im η_n (`uncoupledOmega`).
	 */
	bridgeReactancePerSecond: number;
}

/** All that the engine asks of a piano. Notes are MIDI 21..108, partials 1..40. */
export interface PianoModel {
	id: string;
	name: string;
	kind: 'upright' | 'grand';
	/** B, dimensionless, 0 upwards. */
	inharmonicity(midi: Midi): number;
	/** Strings struck by this note's hammer. */
	stringCount(midi: Midi): 1 | 2 | 3;
	/**
	 * One partial of one string.
	 * @param partial 1..{@link HIGHEST_PARTIAL}; beyond that the amplitude is 0
	 * @param velocity 0 (silent) to 1 (a hard blow)
	 */
	tone(midi: Midi, partial: number, velocity: number): PartialTone;
}

/** Partials that a tone has at most. */
export const HIGHEST_PARTIAL = 40;

/** A piano written out in a file or a specification; whatever is left out is the medium grand's. */
export interface InlinePiano {
	name?: string;
	kind?: 'upright' | 'grand';
	/** B of every note (0 = no stiffness), or of single notes by name. */
	inharmonicity?: number | Record<string, number>;
	/** Strings of every note, or of single notes by name. */
	strings?: 1 | 2 | 3 | Record<string, 1 | 2 | 3>;
}

/** A shipped piano's id, `'0'` (no stiffness), or a piano written out. */
export type PianoSpec = string | InlinePiano;
