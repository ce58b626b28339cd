import { equalTemperamentHz } from '../../acoustics/units';
import { coincidencesOf } from './coincidences';
import { partialOf, type Stiffness } from './comb';
import type { FoundNote } from './found-notes';
import { HIGHEST_HZ } from './note-finder';

const UNISON_PARTIALS = 8;

/** A pair of partials to be measured. */
export interface PairQuestion {
	lowerPartial: number;
	upperPartial: number;
	lowHz: number;
	highHz: number;
	spacingHz: number;
	/** Both notes' own places are known. */
	known: boolean;
}

/** Every pair of the note's own partials, or of two notes' coincident ones, customary first. */
export function questionsFor(found: FoundNote[], sampleRateHz: number): PairQuestion[] {
	const highest = Math.min(HIGHEST_HZ, 0.45 * sampleRateHz);
	const strings = found.map(stringOf);
	if (found.length === 1) return unisonQuestions(strings[0], highest);
	const [low, high] = strings;
	return coincidencesOf(found[0].midi, found[1].midi)
		.map(({ lowerPartial, upperPartial }) => ({
			lowerPartial,
			upperPartial,
			lowHz: partialOf(low, lowerPartial),
			highHz: partialOf(high, upperPartial),
			spacingHz: spacingAround(low, lowerPartial, high, upperPartial),
			known: found.every(({ fit }) => fit !== null)
		}))
		.filter(({ lowHz, highHz }) => Math.max(lowHz, highHz) < highest);
}

function unisonQuestions(string: Stiffness, highest: number): PairQuestion[] {
	const questions: PairQuestion[] = [];
	for (let n = 1; n <= UNISON_PARTIALS; n++) {
		const hz = partialOf(string, n);
		if (hz >= highest) break;
		questions.push({
			lowerPartial: n,
			upperPartial: n,
			lowHz: hz,
			highHz: hz,
			spacingHz: string.f0Hz,
			known: true
		});
	}
	return questions;
}

/** The best knowledge of a note: its fit, else its comb, else equal temperament. */
function stringOf({ midi, match, fit }: FoundNote): Stiffness {
	return fit ?? match ?? { f0Hz: equalTemperamentHz(midi), inharmonicity: 0 };
}

/** Distance from the meeting place to the nearest partial that is not of the pair. */
function spacingAround(low: Stiffness, p: number, high: Stiffness, q: number): number {
	const middle = (partialOf(low, p) + partialOf(high, q)) / 2;
	let spacing = Infinity;
	for (let n = 1; n <= p + 2; n++) {
		if (n !== p) spacing = Math.min(spacing, Math.abs(partialOf(low, n) - middle));
		if (n !== q) spacing = Math.min(spacing, Math.abs(partialOf(high, n) - middle));
	}
	return spacing;
}
