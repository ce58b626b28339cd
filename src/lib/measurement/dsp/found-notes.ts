import { centsBetween, equalTemperamentHz, noteName, ratioFromCents } from '../../acoustics/units';
import type { NoteMeasure } from '../types';
import { partialOf, type CombMatch, type Stiffness } from './comb';
import { findNote, fitNote, HIGHEST_HZ } from './note-finder';
import type { SpectralPeak } from './spectrum';
import { readPartials, type StiffnessFit } from './stiffness-fit';

/** A note found in the clip (or not). */
export interface FoundNote {
	midi: number;
	match: CombMatch | null;
	fit: StiffnessFit | null;
	/** Peak of the first partial, where too few partials are there for a fit. */
	firstPartialHz: number | null;
}

/** Finds the notes and fits them; in an interval each from partials that it has for itself. */
export function findNotes(
	peaks: SpectralPeak[],
	midis: number[],
	sampleRateHz: number
): FoundNote[] {
	const combs = midis.map((midi) => findNote(peaks, midi, sampleRateHz));
	const matches = combs.map((match, i) => {
		if (midis.length === 1) return match ?? pureTone(peaks, midis[i]);
		const other = combs[1 - i];
		return match && other && !hasOwnPartials(peaks, match, other) ? null : match;
	});
	return midis.map((midi, i) => {
		const match = matches[i];
		const other = matches.length === 2 ? matches[1 - i] : null;
		const skip = other ? (_n: number, hz: number) => meets(other, hz) : undefined;
		const fit = match && fitNote(peaks, match, sampleRateHz, skip);
		return { midi, match, fit, firstPartialHz: match && firstPartial(peaks, match, skip) };
	});
}

/** A pure tone stands this far above everything else. */
const PURE_DB = 20;
const PURE_OVER_FLOOR_DB = 35;
const PURE_CENTS = 60;

/** A fork, or a string of which only one partial is heard: one line at the note's own place. */
function pureTone(peaks: SpectralPeak[], midi: number): CombMatch | null {
	const [first, second] = peaks.slice().sort((a, b) => b.levelDb - a.levelDb);
	if (!first || first.aboveFloorDb < PURE_OVER_FLOOR_DB) return null;
	if (second && second.levelDb > first.levelDb - PURE_DB) return null;
	const f0Hz = first.frequencyHz;
	if (Math.abs(centsBetween(f0Hz, equalTemperamentHz(midi))) > PURE_CENTS) return null;
	return { f0Hz, inharmonicity: 0, score: 0, found: 1 };
}

const LOW_PARTIALS = 6;

/**
 * Whether a note of an interval sounds itself: some of the low partials that it does not share
 * with the other note are there. A note that shares all of them cannot be told.
 */
function hasOwnPartials(peaks: SpectralPeak[], match: CombMatch, other: CombMatch): boolean {
	const skip = (_n: number, hz: number): boolean => meets(other, hz);
	let own = 0;
	for (let n = 1; n <= LOW_PARTIALS; n++) if (!skip(n, partialOf(match, n))) own++;
	const heard = readPartials(peaks, match, LOW_PARTIALS, HIGHEST_HZ, skip).length;
	return own < 2 || 3 * heard >= own;
}

function firstPartial(
	peaks: SpectralPeak[],
	match: CombMatch,
	skip?: (n: number, hz: number) => boolean
): number | null {
	const reading = readPartials(peaks, match, 1, HIGHEST_HZ, skip)[0];
	return reading?.frequencyHz ?? null;
}

/** Whether a frequency lies too near a partial of another string to be read beside it. */
function meets(other: Stiffness, hz: number): boolean {
	const n = Math.max(1, Math.round(hz / other.f0Hz));
	return [n - 1, n, n + 1].some(
		(m) => m > 0 && Math.abs(partialOf(other, m) - hz) < Math.max(6, 0.012 * hz)
	);
}

/** The note as the result states it. */
export function describeNote({ midi, fit, firstPartialHz }: FoundNote): NoteMeasure {
	const note = noteName(midi);
	if (!fit) return describeUnfitted(note, midi, firstPartialHz);
	// Without a low partial of its own the note is told from far up the series: less sure.
	const far = Math.min(...fit.readings.map(({ n }) => n)) > LOWEST_OWN;
	const f1 = Math.hypot(2 * fit.f1Sd, far ? fit.f1Hz * (ratioFromCents(FAR_CENTS) - 1) : 0);
	const b = Math.hypot(2 * fit.inharmonicitySd, far ? FAR_SHARE * fit.inharmonicity : 0);
	return {
		note,
		f1Hz: fit.f1Hz,
		f1Ci95Hz: [fit.f1Hz - f1, fit.f1Hz + f1],
		inharmonicity: fit.inharmonicity,
		inharmonicityCi95: [Math.max(0, fit.inharmonicity - b), fit.inharmonicity + b],
		centsFromEqual: centsBetween(fit.f1Hz, equalTemperamentHz(midi))
	};
}

/** A note read from partials above this alone, as an octave's upper one, and what that costs. */
const LOWEST_OWN = 4;
const FAR_CENTS = 10;
const FAR_SHARE = 0.2;

/** Half-width of a pitch read off one peak, where several strings may pull it about. */
const ONE_PEAK_CENTS = 2;

function describeUnfitted(note: string, midi: number, f1Hz: number | null): NoteMeasure {
	const half = (f1Hz ?? 0) * (ratioFromCents(ONE_PEAK_CENTS) - 1);
	return {
		note,
		f1Hz,
		f1Ci95Hz: f1Hz === null ? null : [f1Hz - half, f1Hz + half],
		inharmonicity: null,
		inharmonicityCi95: null,
		centsFromEqual: f1Hz === null ? null : centsBetween(f1Hz, equalTemperamentHz(midi))
	};
}
