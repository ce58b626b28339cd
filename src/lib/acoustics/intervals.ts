import { partialHzFromF1 } from './stiff-string';
import type { BeatsPerSecond, Hertz, Midi } from './units';

export type IntervalId =
	| 'unison'
	| 'minor-third'
	| 'major-third'
	| 'fourth'
	| 'fifth'
	| 'minor-sixth'
	| 'major-sixth'
	| 'octave'
	| 'tenth'
	| 'twelfth'
	| 'double-octave'
	| 'seventeenth';

/** The partial of the lower note and the partial of the upper note that nearly meet. */
export interface PartialPair {
	readonly lowerPartial: number;
	readonly upperPartial: number;
}

export interface Interval {
	readonly id: IntervalId;
	readonly name: string;
	readonly semitones: number;
	/** Coincident pairs that are listened to, the customary one first. */
	readonly pairs: readonly PartialPair[];
}

/** A stiff string as an interval sees it: its sounding first partial and its B. */
export interface IntervalBeatInput extends PartialPair {
	lowF1Hz: Hertz;
	lowInharmonicity: number;
	highF1Hz: Hertz;
	highInharmonicity: number;
}

function interval(
	id: IntervalId,
	name: string,
	semitones: number,
	pairs: readonly (readonly [number, number])[]
): Interval {
	return {
		id,
		name,
		semitones,
		pairs: pairs.map(([lowerPartial, upperPartial]) => ({ lowerPartial, upperPartial }))
	};
}

/** The intervals of the trade (common practice) with the partials at which they are heard. */
export const INTERVALS: Readonly<Record<IntervalId, Interval>> = {
	unison: interval(
		'unison',
		'unison',
		0,
		[1, 2, 3, 4, 5, 6, 7, 8].map((n) => [n, n] as const)
	),
	'minor-third': interval('minor-third', 'minor third', 3, [
		[6, 5],
		[12, 10]
	]),
	'major-third': interval('major-third', 'major third', 4, [
		[5, 4],
		[10, 8]
	]),
	fourth: interval('fourth', 'fourth', 5, [
		[4, 3],
		[8, 6]
	]),
	fifth: interval('fifth', 'fifth', 7, [
		[3, 2],
		[6, 4],
		[9, 6]
	]),
	'minor-sixth': interval('minor-sixth', 'minor sixth', 8, [[8, 5]]),
	'major-sixth': interval('major-sixth', 'major sixth', 9, [
		[5, 3],
		[10, 6]
	]),
	octave: interval('octave', 'octave', 12, [
		[4, 2],
		[2, 1],
		[6, 3],
		[8, 4],
		[10, 5]
	]),
	tenth: interval('tenth', 'major tenth', 16, [
		[5, 2],
		[10, 4]
	]),
	twelfth: interval('twelfth', 'twelfth', 19, [
		[3, 1],
		[6, 2]
	]),
	'double-octave': interval('double-octave', 'double octave', 24, [
		[4, 1],
		[8, 2]
	]),
	seventeenth: interval('seventeenth', 'major seventeenth', 28, [
		[5, 1],
		[10, 2]
	])
};

const BY_SEMITONES = new Map(
	Object.values(INTERVALS).map((entry) => [entry.semitones, entry.id] as const)
);

/** The interval between two notes, or null when the trade has no name for it here. */
export function intervalBetween(lowMidi: Midi, highMidi: Midi): IntervalId | null {
	return BY_SEMITONES.get(highMidi - lowMidi) ?? null;
}

/**
 * Every pair of partials of two notes that nearly meet, `lowerPartial` up to `highestPartial`
 * (default 16): the whole multiples of the interval's simplest ratio p:q. The customary pair
 * comes first, the rest by rising partial. An interval without a name here gives an empty list.
 */
export function coincidentPairs(lowMidi: Midi, highMidi: Midi, highestPartial = 16): PartialPair[] {
	const id = intervalBetween(lowMidi, highMidi);
	if (id === null) return [];
	const simplest = INTERVALS[id].pairs.reduce((least, pair) =>
		pair.lowerPartial < least.lowerPartial ? pair : least
	);
	const pairs: PartialPair[] = [];
	for (let k = 1; k * simplest.lowerPartial <= highestPartial; k += 1) {
		pairs.push({
			lowerPartial: k * simplest.lowerPartial,
			upperPartial: k * simplest.upperPartial
		});
	}
	const customary = customaryPair(lowMidi, highMidi);
	const isCustomary = (pair: PartialPair) => pair.lowerPartial === customary?.lowerPartial;
	return [...pairs.filter(isCustomary), ...pairs.filter((pair) => !isCustomary(pair))];
}

/**
 * The pair at which an interval is customarily judged, or null for an interval without a name
 * here. Octaves change with the register (common practice, no source): 6:3 when the lower note is
 * below A2, 4:2 up to F4, 2:1 above; every other interval has one pair throughout.
 */
export function customaryPair(lowMidi: Midi, highMidi: Midi): PartialPair | null {
	const id = intervalBetween(lowMidi, highMidi);
	if (id === null) return null;
	if (id === 'octave' && lowMidi < 45) return { lowerPartial: 6, upperPartial: 3 };
	if (id === 'octave' && lowMidi > 65) return { lowerPartial: 2, upperPartial: 1 };
	return INTERVALS[id].pairs[0];
}

/**
 * Signed beat of a coincident pair: f_high(q) − f_low(p), b/s. Positive when the interval is
 * wide, negative when narrow; the rate heard is its absolute value.
 */
export function signedBeatHz(input: IntervalBeatInput): BeatsPerSecond {
	return (
		partialHzFromF1(input.upperPartial, input.highF1Hz, input.highInharmonicity) -
		partialHzFromF1(input.lowerPartial, input.lowF1Hz, input.lowInharmonicity)
	);
}
