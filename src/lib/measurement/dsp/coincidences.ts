import { coincidentPairs, type PartialPair } from '../../acoustics/intervals';

/** Highest partial of the lower note that is listened to. */
const HIGHEST_PARTIAL = 16;
/** Partials farther apart than this (on strings without stiffness) do not meet. */
const NEAR_CENTS = 20;

/**
 * Pairs of partials of two notes that nearly meet, customary first. An interval without a name of
 * its own (a tritone, a second, a seventh) has the simple ratios p:q within 20 cents of it, the
 * simplest first, with their multiples, `lowerPartial` up to 16; empty when there are none.
 */
export function coincidencesOf(lowMidi: number, highMidi: number): PartialPair[] {
	const named = coincidentPairs(lowMidi, highMidi, HIGHEST_PARTIAL);
	if (named.length > 0 || lowMidi === highMidi) return named;
	const pairs: PartialPair[] = [];
	const ratio = 2 ** ((highMidi - lowMidi) / 12);
	for (let lowerPartial = 1; lowerPartial <= HIGHEST_PARTIAL; lowerPartial++) {
		const upperPartial = Math.max(1, Math.round(lowerPartial / ratio));
		const cents = 1200 * Math.log2((upperPartial * ratio) / lowerPartial);
		if (Math.abs(cents) <= NEAR_CENTS) pairs.push({ lowerPartial, upperPartial });
	}
	// The lowest that meet are the simplest ratio, the loudest and the first heard.
	return pairs;
}
