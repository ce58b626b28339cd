import { PitchDetector } from 'pitchy';
import { A4_MIDI, STANDARD_A4_HZ, equalTemperamentHz, ratioFromCents } from '../../acoustics/units';
import { partialOf, searchComb, type CombMatch, type CombRange } from './comb';
import { findPeaks, levelSpectrum, type SpectralPeak } from './spectrum';
import { fitStiffness, readPartials, type StiffnessFit } from './stiffness-fit';
import type { Strike } from './strike';

/** Partials above this are not used. */
export const HIGHEST_HZ = 9000;
const SEARCH_CENTS = 60;
const COMB_PARTIALS = 16;
const FIT_PARTIALS = 20;
const MIN_FOUND = 3;
/** Of the partials that could be there; chance peaks of noise reach about a quarter. */
const MIN_SHARE = 0.35;

/** The spectrum's peaks while the tone is fresh: 0.1 to about 1.4 s after the strike. */
export function tonePeaks(
	samples: Float32Array,
	sampleRateHz: number,
	strike: Strike
): SpectralPeak[] {
	const from = strike.sample + Math.round(0.1 * sampleRateHz);
	const to = Math.min(strike.endSample, strike.sample + Math.round(1.4 * sampleRateHz));
	if (to - from < 0.15 * sampleRateHz) return [];
	const highest = Math.min(HIGHEST_HZ, 0.45 * sampleRateHz);
	return findPeaks(levelSpectrum(samples, sampleRateHz, from, to), 24, highest);
}

function rangeOf(midi: number, sampleRateHz: number): CombRange {
	const middle = equalTemperamentHz(midi);
	return {
		lowF1Hz: middle * ratioFromCents(-SEARCH_CENTS),
		highF1Hz: middle * ratioFromCents(SEARCH_CENTS),
		highestHz: Math.min(HIGHEST_HZ, 0.45 * sampleRateHz),
		maxPartials: COMB_PARTIALS
	};
}

/** The named note's comb among the peaks; null when too few of its partials are there. */
export function findNote(
	peaks: readonly SpectralPeak[],
	midi: number,
	sampleRateHz: number
): CombMatch | null {
	const range = rangeOf(midi, sampleRateHz);
	const match = searchComb(peaks, range);
	if (!match) return null;
	let possible = 0;
	while (possible < COMB_PARTIALS && partialOf(match, possible + 1) < range.highestHz) possible++;
	const needed = Math.min(possible, Math.max(MIN_FOUND, Math.ceil(MIN_SHARE * possible)));
	return match.found >= needed && match.score > 0 ? match : null;
}

/** f0 and B of a found note, with partials left out that meet another note's. */
export function fitNote(
	peaks: readonly SpectralPeak[],
	match: CombMatch,
	sampleRateHz: number,
	skip?: (n: number, hz: number) => boolean
): StiffnessFit | null {
	const highest = Math.min(HIGHEST_HZ, 0.45 * sampleRateHz);
	const first = fitStiffness(readPartials(peaks, match, FIT_PARTIALS, highest, skip));
	if (!first) return null;
	return fitStiffness(readPartials(peaks, first, FIT_PARTIALS, highest, skip)) ?? first;
}

/** Pitch by the McLeod method (pitchy) in three places of the fresh tone, in hertz. */
function mcLeodPitches(samples: Float32Array, sampleRateHz: number, strike: Strike): number[] {
	const length = 2 ** Math.round(Math.log2(0.085 * sampleRateHz));
	const detector = PitchDetector.forFloat32Array(length);
	const pitches: number[] = [];
	for (const seconds of [0.1, 0.3, 0.6]) {
		const from = strike.sample + Math.round(seconds * sampleRateHz);
		if (from + length > strike.endSample) break;
		const [hz, clarity] = detector.findPitch(samples.subarray(from, from + length), sampleRateHz);
		if (clarity > 0.6 && hz > 20) pitches.push(hz);
	}
	return pitches;
}

function midiOf(hz: number): number {
	return Math.round(A4_MIDI + 12 * Math.log2(hz / STANDARD_A4_HZ));
}

/** Share of the strong peaks' weight (within the comb's reach) that the comb explains. */
function explainedShare(peaks: readonly SpectralPeak[], match: CombMatch): number {
	const reach = partialOf(match, COMB_PARTIALS);
	const loudest = peaks.reduce((max, peak) => Math.max(max, peak.levelDb), -Infinity);
	let all = 0;
	let explained = 0;
	for (const peak of peaks) {
		const weight = peak.levelDb - (loudest - 45);
		if (weight <= 0 || peak.frequencyHz > reach) continue;
		all += weight;
		if (isPartial(match, peak.frequencyHz)) explained += weight;
	}
	return all > 0 ? explained / all : 0;
}

function isPartial(match: CombMatch, hz: number): boolean {
	for (let n = 1; n <= COMB_PARTIALS; n++) {
		const place = partialOf(match, n);
		if (Math.abs(place - hz) <= Math.max(1.5, 0.008 * place)) return true;
	}
	return false;
}

/**
 * Names the struck note: candidates from the McLeod pitch and the strongest peaks, with their
 * octave and twelfth neighbours, judged by the comb and by how much of the sound it explains.
 * @returns MIDI number, or null when nothing looks like a string's partials
 */
export function detectNote(
	samples: Float32Array,
	sampleRateHz: number,
	strike: Strike,
	peaks: readonly SpectralPeak[]
): number | null {
	const candidates = new Set<number>();
	for (const hz of mcLeodPitches(samples, sampleRateHz, strike)) {
		for (const ratio of [1, 2, 0.5, 3, 1 / 3]) candidates.add(midiOf(hz * ratio));
	}
	const strongest = peaks.slice().sort((a, b) => b.levelDb - a.levelDb);
	for (const peak of strongest.slice(0, 3)) {
		for (const n of [1, 2, 3, 4]) candidates.add(midiOf(peak.frequencyHz / n));
	}
	let best: { midi: number; worth: number } | null = null;
	for (const midi of candidates) {
		if (midi < 21 || midi > 108) continue;
		const match = findNote(peaks, midi, sampleRateHz);
		if (!match) continue;
		const worth = worthOf(peaks, match);
		if (!best || worth > best.worth) best = { midi: nearestNote(match), worth };
	}
	return best?.midi ?? null;
}

function worthOf(peaks: readonly SpectralPeak[], match: CombMatch): number {
	return match.score * explainedShare(peaks, match) ** 2;
}

/** The named note's comb must be this much poorer before the person is doubted. */
const DOUBT_SHARE = 0.75;

/**
 * The note that a sound rather is when it is not the named one; null when it may be the named one
 * or nothing can be told. The comb of a wrongly named note can fit by chance, so it is compared
 * with the best.
 */
export function otherNoteHeard(
	samples: Float32Array,
	sampleRateHz: number,
	strike: Strike,
	peaks: readonly SpectralPeak[],
	midi: number
): number | null {
	const heard = detectNote(samples, sampleRateHz, strike, peaks);
	if (heard === null || heard === midi) return null;
	const named = findNote(peaks, midi, sampleRateHz);
	const best = findNote(peaks, heard, sampleRateHz);
	if (!named || !best) return heard;
	return worthOf(peaks, named) < DOUBT_SHARE * worthOf(peaks, best) ? heard : null;
}

function nearestNote(match: CombMatch): number {
	return midiOf(partialOf(match, 1));
}
