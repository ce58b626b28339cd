import { coincidentPairs, type PartialPair } from './intervals';
import { partialHz, flexibleFundamentalHz } from './stiff-string';
import type { PianoModel } from './piano-types';
import { HIGHEST_PARTIAL } from './piano-types';
import { equalTemperamentHz, type Midi } from './units';

export interface AudiblePair extends PartialPair {
	/** Level of the weaker of the two partials, dB below the loudest pair's. */
	levelDb: number;
}

/** Pairs weaker than this against the loudest are not listed. */
const FAINTEST_DB = -50;
/** Partials above this are not used for tuning by ear. */
const HIGHEST_HZ = 9_000;

/**
 * Coincident pairs of an interval on a piano by loudness, loudest first: a beat is as deep as
 * the weaker of its two partials, so that one counts.
 */
export function audiblePairs(
	piano: PianoModel,
	lowMidi: Midi,
	highMidi: Midi,
	velocity = 0.6
): AudiblePair[] {
	const lowB = piano.inharmonicity(lowMidi);
	const lowF0Hz = flexibleFundamentalHz(equalTemperamentHz(lowMidi), lowB);
	const levels = coincidentPairs(lowMidi, highMidi, HIGHEST_PARTIAL)
		.filter((pair) => partialHz(pair.lowerPartial, lowF0Hz, lowB) < HIGHEST_HZ)
		.map((pair) => {
			const low = piano.tone(lowMidi, pair.lowerPartial, velocity).amplitude;
			const high = piano.tone(highMidi, pair.upperPartial, velocity).amplitude;
			return {
				...pair,
				level:
					20 *
					Math.log10(Math.min(low * piano.stringCount(lowMidi), high * piano.stringCount(highMidi)))
			};
		})
		.sort((a, b) => b.level - a.level);
	return levels
		.map(({ lowerPartial, upperPartial, level }) => ({
			lowerPartial,
			upperPartial,
			levelDb: level - levels[0].level
		}))
		.filter((pair) => pair.levelDb >= FAINTEST_DB);
}
