import type { Midi } from './units';

/** Weight by lower note: straight lines between nodes, nothing outside them. */
export type WeightNodes = readonly (readonly [Midi, number])[];

/** Octave type lowerPartial:upperPartial that should be near beatless, and where. */
export interface OctaveTypeWeight {
	lowerPartial: number;
	upperPartial: number;
	semitones: number;
	weight: WeightNodes;
}

/**
 * A style of stretching: which octave types are kept clean in which register. The first is the one
 * that the temperament's octaves are made of.
 */
export interface TargetStyle {
	name: string;
	octaves: readonly OctaveTypeWeight[];
}

const DOUBLE_OCTAVE: OctaveTypeWeight = {
	lowerPartial: 4,
	upperPartial: 1,
	semitones: 24,
	weight: [
		[21, 0.1],
		[38, 0.3],
		[57, 0.3],
		[66, 0.5],
		[72, 1],
		[84, 1]
	]
};

const octave = (lowerPartial: number, weight: WeightNodes): OctaveTypeWeight => ({
	lowerPartial,
	upperPartial: lowerPartial / 2,
	semitones: 12,
	weight
});

/** Around the temperament, where one octave type is made clean. */
const MIDDLE: WeightNodes = [
	[33, 0],
	[44, 0.5],
	[50, 2],
	[52, 10],
	[53, 100],
	[57, 100],
	[58, 10],
	[62, 2],
	[70, 1],
	[80, 0.3],
	[84, 0]
];
const BASS_SIX_THREE = octave(6, [
	[21, 2],
	[44, 2],
	[50, 0.5],
	[53, 0]
]);
const BASS_EIGHT_FOUR = octave(8, [
	[21, 0.2],
	[30, 0.1],
	[38, 0]
]);
const TREBLE_TWO_ONE = octave(2, [
	[57, 0],
	[62, 0.7],
	[74, 3],
	[96, 3]
]);

/** The styles on offer; the first is the default (common practice, no source). */
export const TARGET_STYLES: Readonly<Record<string, TargetStyle>> = {
	'four-two': {
		name: 'Clean 4:2 octaves in the middle, 6:3 in the bass',
		octaves: [octave(4, MIDDLE), BASS_SIX_THREE, BASS_EIGHT_FOUR, TREBLE_TWO_ONE, DOUBLE_OCTAVE]
	},
	'two-one': {
		name: 'Clean 2:1 octaves in the middle, less stretch',
		octaves: [octave(2, MIDDLE), BASS_SIX_THREE, BASS_EIGHT_FOUR, TREBLE_TWO_ONE, DOUBLE_OCTAVE]
	},
	'six-three': {
		name: 'Clean 6:3 octaves in the middle, more stretch',
		octaves: [octave(6, MIDDLE), BASS_SIX_THREE, BASS_EIGHT_FOUR, TREBLE_TWO_ONE, DOUBLE_OCTAVE]
	}
};

export const DEFAULT_STYLE = 'four-two';

/** Smoothness asked of a run of intervals: weight on the second difference of their width. */
export interface SeriesWeight {
	lowerPartial: number;
	upperPartial: number;
	semitones: number;
	firstLow: Midi;
	lastLow: Midi;
	weight: number;
}

const series = (
	lowerPartial: number,
	upperPartial: number,
	semitones: number,
	firstLow: Midi,
	lastLow: Midi,
	weight: number
): SeriesWeight => ({ lowerPartial, upperPartial, semitones, firstLow, lastLow, weight });

export const SERIES_WEIGHTS: readonly SeriesWeight[] = [
	series(5, 4, 4, 33, 72, 3),
	series(5, 3, 9, 33, 70, 3),
	series(5, 2, 16, 31, 72, 3),
	series(5, 1, 28, 21, 69, 3),
	series(6, 5, 3, 50, 66, 0.3),
	series(3, 2, 7, 45, 80, 0.5),
	series(4, 3, 5, 45, 80, 0.5),
	series(2, 1, 12, 69, 96, 0.3),
	series(4, 1, 24, 60, 84, 0.3)
];

/** Smoothness of the tuning curve itself, taken at a partial that moves with the register. */
export const CURVE_WEIGHT: WeightNodes = [
	[21, 0.5],
	[50, 0.05],
	[69, 0.05],
	[76, 1],
	[108, 1]
];
export const CURVE_PARTIAL: WeightNodes = [
	[21, 6],
	[45, 5],
	[60, 4],
	[72, 2],
	[84, 1]
];

/** Runs that must rise: next ≥ 1.02·2^(−1/12)·this + 0.01 cents, for lower notes in the range. */
export const RISING_RUNS: readonly Omit<SeriesWeight, 'weight'>[] = [
	series(5, 4, 4, 48, 65, 0),
	series(5, 3, 9, 48, 62, 0),
	series(5, 2, 16, 41, 60, 0),
	series(5, 1, 28, 33, 57, 0)
];

/**
 * Octaves of the temperament never beat more than this at the style's own type, however a measured
 * B scatters. Not reached on smooth stiffness.
 */
export const CLEAN_OCTAVES = { firstLow: 53, lastLow: 57, mostBeatHz: 0.18 } as const;

/** Lower notes whose fifths must stay narrow and fourths wide by at least this many cents. */
export const TEMPERED = { firstLow: 53, lastLow: 62, leastCents: 0.4 } as const;
