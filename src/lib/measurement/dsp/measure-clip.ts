import { noteName } from '../../acoustics/units';
import type { MeasureOptions, MeasureResult, PairMeasure } from '../types';
import { bandShape, clipSpectrum, type ClipSpectrum } from './band';
import { REASONS, type BandAnswer } from './band-answer';
import { measureBand } from './band-measure';
import { describeNote, findNotes, type FoundNote } from './found-notes';
import { detectNote, otherNoteHeard, tonePeaks } from './note-finder';
import { coincidencesOf } from './coincidences';
import { otherNoteSentence } from './note-doubt';
import { questionsFor, type PairQuestion } from './pair-questions';
import type { SpectralPeak } from './spectrum';
import { clippedShare, findStrike, type Strike } from './strike';
import { notMeasurable, type BandVerdict } from './verdict';

const MAX_SECONDS = 8;
const CLIPPED_SHARE = 2e-4;
const CLIPPED = 'The recording is driven into its limit; set the input lower and strike again.';
const NO_MEETING =
	'No partials of these two notes meet below the 17th of the lower one, so there is no beat to measure.';
const TOO_FEW = 'has too few partials here to measure its stiffness.';
const TOO_FEW_OWN =
	'has too few partials of its own here; strike it alone to measure its pitch and stiffness.';
const NO_STRIKE = 'No struck tone was heard.';

/**
 * Measures a clip of one struck note, one unison or one interval.
 * @param samples mono, -1..1, with the strike in it
 * @param sampleRateHz 8,000 to 192,000
 * @param options what was meant; see {@link MeasureOptions}
 * @returns the notes' f_1 and B, and per coincident partial the beat or why there is none
 */
export function measureClip(
	samples: Float32Array,
	sampleRateHz: number,
	options: MeasureOptions
): MeasureResult {
	const strike = limited(findStrike(samples, sampleRateHz), sampleRateHz, options.seconds);
	const peaks = strike ? tonePeaks(samples, sampleRateHz, strike) : [];
	const midis = namedNotes(samples, sampleRateHz, options, strike, peaks);
	if (midis.length === 0) return { notes: [], pairs: [], advice: [NO_STRIKE] };
	const other = strike && otherThanNamed(samples, sampleRateHz, options, strike, peaks);
	const found = other ? midis.map(unfound) : findNotes(peaks, midis, sampleRateHz);
	const advice = adviceFor(samples, strike, found, other);
	const notes = found.map(describeNote);
	const usable = strike && found.every(({ match }) => match) ? strike : null;
	const clip = usable && strikeClip(samples, sampleRateHz, usable);
	const clipped = clippedShare(samples) > CLIPPED_SHARE;
	const pairs = questionsFor(found, sampleRateHz).flatMap((question) => {
		if (!clip) return [unheard(question, strike ? advice[advice.length - 1] : NO_STRIKE)];
		if (clipped) return [unheard(question, CLIPPED)];
		return options.kind === 'interval'
			? measurePair(clip, question, 'interval')
			: unlessFarApart(measurePair(clip, question, 'unison'), question, peaks);
	});
	return { notes, pairs, advice };
}

function limited(
	strike: Strike | null,
	sampleRateHz: number,
	seconds = MAX_SECONDS
): Strike | null {
	if (!strike) return null;
	const endSample = Math.min(strike.endSample, strike.sample + Math.round(seconds * sampleRateHz));
	return { ...strike, endSample };
}

function namedNotes(
	samples: Float32Array,
	sampleRateHz: number,
	options: MeasureOptions,
	strike: Strike | null,
	peaks: SpectralPeak[]
): number[] {
	const named = options.notes ?? [];
	if (options.kind === 'interval') {
		if (named.length !== 2) throw new RangeError('An interval needs two notes.');
		return [...named].sort((a, b) => a - b);
	}
	if (named.length > 1) throw new RangeError('A note or unison needs one note.');
	if (named.length === 1) return [...named];
	const midi = strike && detectNote(samples, sampleRateHz, strike, peaks);
	return midi === null ? [] : [midi];
}

/** The note that sounds in place of the one named, when one was named. */
function otherThanNamed(
	samples: Float32Array,
	sampleRateHz: number,
	{ kind, notes }: MeasureOptions,
	strike: Strike,
	peaks: SpectralPeak[]
): number | null {
	if (kind === 'interval' || notes?.length !== 1) return null;
	return otherNoteHeard(samples, sampleRateHz, strike, peaks, notes[0]);
}

function unfound(midi: number): FoundNote {
	return { midi, match: null, fit: null, firstPartialHz: null };
}

function adviceFor(
	samples: Float32Array,
	strike: Strike | null,
	found: FoundNote[],
	other: number | null
): string[] {
	const advice: string[] = [];
	if (!strike) return [NO_STRIKE];
	if (clippedShare(samples) > CLIPPED_SHARE) advice.push(CLIPPED);
	if (other !== null) return [...advice, otherNoteSentence(other, found[0].midi)];
	if (found.length === 2 && coincidencesOf(found[0].midi, found[1].midi).length === 0) {
		advice.push(NO_MEETING);
	}
	for (const { midi, match, fit } of found) {
		if (!match) advice.push(`${noteName(midi)} was not found in this sound.`);
		else if (!fit) {
			advice.push(`${noteName(midi)} ${found.length === 1 ? TOO_FEW : TOO_FEW_OWN}`);
		}
	}
	return advice;
}

interface StruckClip {
	spectrum: ClipSpectrum;
	strikeSeconds: number;
	endSeconds: number;
}

const LEAD_SECONDS = 0.05;

/** The part of the clip that is measured, with a little before the strike. */
function strikeClip(samples: Float32Array, sampleRateHz: number, strike: Strike): StruckClip {
	const from = Math.max(0, strike.sample - Math.round(LEAD_SECONDS * sampleRateHz));
	const part = samples.subarray(from, strike.endSample);
	return {
		spectrum: clipSpectrum(part, sampleRateHz),
		strikeSeconds: (strike.sample - from) / sampleRateHz,
		endSeconds: part.length / sampleRateHz
	};
}

function measurePair(
	clip: StruckClip,
	question: PairQuestion,
	kind: 'unison' | 'interval'
): PairMeasure[] {
	const { passHz } = bandShape(question.spacingHz);
	const apartHz = Math.abs(question.highHz - question.lowHz);
	if (question.known && apartHz > 2 * passHz) return [unheard(question, tooFast(apartHz, passHz))];
	const middle = (question.lowHz + question.highHz) / 2;
	const expected =
		kind === 'interval' && question.known
			? {
					lowHz: question.lowHz - middle,
					highHz: question.highHz - middle,
					sigmaHz: 2 + 0.0008 * middle
				}
			: null;
	const found = measureBand(clip.spectrum, {
		centreHz: middle,
		spacingHz: question.spacingHz,
		kind,
		expected,
		strikeSeconds: clip.strikeSeconds,
		endSeconds: clip.endSeconds
	});
	return [found.main, ...found.others.slice(0, 3)].map((verdict) =>
		toPair(question, found, verdict)
	);
}

function tooFast(rateHz: number, passHz: number): string {
	return `The two partials are about ${rateHz.toFixed(0)} Hz apart here; no beat faster than ${(2 * passHz).toFixed(0)} per second can be shown.`;
}

const FAR_APART = 'The strings are too far apart here to beat; bring them nearer first.';
const BAND_HZ = 20;
const AUDIBLE_DB = 26;
/** A peak this far above the floor is no chance peak of noise. */
const SURE_DB = 20;

/**
 * `still` speaks of the band around the partial: where a second string sounds beyond it, that is
 * said instead, and so it is where nothing could be told.
 */
function unlessFarApart(
	pairs: PairMeasure[],
	question: PairQuestion,
	peaks: readonly SpectralPeak[]
): PairMeasure[] {
	if (pairs[0].verdict !== 'still' && pairs[0].reason !== REASONS.several) return pairs;
	const middle = question.lowHz;
	const near = peaks.filter(
		({ frequencyHz, aboveFloorDb }) =>
			aboveFloorDb > SURE_DB && Math.abs(frequencyHz - middle) < 0.5 * question.spacingHz
	);
	const level = (inside: boolean): number =>
		near
			.filter(({ frequencyHz }) => Math.abs(frequencyHz - middle) <= BAND_HZ === inside)
			.reduce((max, peak) => Math.max(max, peak.levelDb), -Infinity);
	if (level(false) === -Infinity || level(false) < level(true) - AUDIBLE_DB) return pairs;
	return [{ ...pairs[0], ...notMeasurable(FAR_APART) }];
}

function toPair(question: PairQuestion, found: BandAnswer, verdict: BandVerdict): PairMeasure {
	const { lowerPartial, upperPartial, lowHz, highHz } = question;
	const frequencyHz = (lowHz + highHz) / 2;
	return {
		lowerPartial,
		upperPartial,
		frequencyHz,
		...verdict,
		windowSeconds: found.windowSeconds
	};
}

function unheard(question: PairQuestion, reason: string): PairMeasure {
	const { lowerPartial, upperPartial, lowHz, highHz } = question;
	return {
		lowerPartial,
		upperPartial,
		frequencyHz: (lowHz + highHz) / 2,
		...notMeasurable(reason),
		windowSeconds: [0, 0]
	};
}
