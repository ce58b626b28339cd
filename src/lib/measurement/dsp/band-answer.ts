import type { BandSignal } from './band';
import type { SplitWindow } from './clusters';
import type { OrderFit } from './orders';
import type { ExpectedPlaces } from './rate-rule';
import type { BandVerdict } from './verdict';

/** What is asked of one band. */
export interface BandQuestion {
	centreHz: number;
	/** Distance to the nearest partial that does not belong to the pair. */
	spacingHz: number;
	kind: 'unison' | 'interval';
	/** Where the two notes should be, for an interval whose notes are known. */
	expected: ExpectedPlaces | null;
	/** The strike, and the end of the sound, in seconds from the start of the clip. */
	strikeSeconds: number;
	endSeconds: number;
}

export interface BandAnswer {
	main: BandVerdict;
	/** Further rates heard in the same band, strongest first. */
	others: BandVerdict[];
	/** Window used, in seconds from the strike. */
	windowSeconds: [number, number];
	/** Absolute frequencies of the audible components, strongest first. */
	componentsHz: number[];
}

/** Why a band gives no rate. */
export const REASONS = {
	tooWeak: 'This partial is too weak here.',
	tooShort: 'The sound is too short here.',
	several: 'Several strings move at once here; no single rate stands out.',
	swell: 'A slow swell covers everything else here; let the sound ring longer or mute one string.',
	uncertain: 'The rate is too uncertain here; let the sound ring longer.',
	fewBeats: 'Too few beats were heard here; strike again and let the sound ring up to 8 seconds.',
	noisy:
		'Too much noise here to part the strings; bring the microphone nearer or make the room quieter.',
	oneByOne: 'Too close to tell the two notes apart; strike the notes one after the other first.'
} as const;

/** The whole band as a window; with a fit, what lies below its noise counts as not heard. */
export function wholeWindow(band: BandSignal, order?: OrderFit): SplitWindow {
	const floorPower = order && (order.rest.variance * 2 * band.passHz) / band.rateHz;
	return { rateHz: band.rateHz, from: 0, to: band.z.length / 2 - 1, floorPower };
}

/** Puts an answer together; the window is the whole band unless one is given. */
export function bandAnswer(
	main: BandVerdict,
	others: BandVerdict[],
	question: BandQuestion,
	band: BandSignal | null,
	parts: { hz: number; energy: number }[],
	window?: SplitWindow
): BandAnswer {
	const start = (band?.startSeconds ?? question.strikeSeconds) - question.strikeSeconds;
	const length = band ? band.z.length / 2 / band.rateHz : 0;
	const windowSeconds: [number, number] =
		band && window
			? [start + window.from / band.rateHz, start + window.to / band.rateHz]
			: [start, start + length];
	const componentsHz = parts
		.slice()
		.sort((a, b) => b.energy - a.energy)
		.map((part) => (band?.centreHz ?? 0) + part.hz);
	return { main, others, windowSeconds, componentsHz };
}
