import { centsBetween, equalTemperamentHz, noteName } from '../../acoustics/units';
import type { NoteMeasure } from '../types';
import { partialOf, type CombMatch, type Stiffness } from './comb';
import { findNote, fitNote } from './note-finder';
import type { SpectralPeak } from './spectrum';
import type { StiffnessFit } from './stiffness-fit';

/** A note found in the clip (or not). */
export interface FoundNote {
	midi: number;
	match: CombMatch | null;
	fit: StiffnessFit | null;
}

/** Finds the notes and fits them; in an interval each from partials that it has for itself. */
export function findNotes(
	peaks: SpectralPeak[],
	midis: number[],
	sampleRateHz: number
): FoundNote[] {
	const matches = midis.map((midi) => findNote(peaks, midi, sampleRateHz));
	return midis.map((midi, i) => {
		const match = matches[i];
		const other = matches.length === 2 ? matches[1 - i] : null;
		const skip = other ? (_n: number, hz: number) => meets(other, hz) : undefined;
		return { midi, match, fit: match && fitNote(peaks, match, sampleRateHz, skip) };
	});
}

/** Whether a frequency lies too near a partial of another string to be read beside it. */
function meets(other: Stiffness, hz: number): boolean {
	const n = Math.max(1, Math.round(hz / other.f0Hz));
	return [n - 1, n, n + 1].some(
		(m) => m > 0 && Math.abs(partialOf(other, m) - hz) < Math.max(6, 0.012 * hz)
	);
}

/** The note as the result states it. */
export function describeNote({ midi, match, fit }: FoundNote): NoteMeasure {
	const note = noteName(midi);
	if (!match || !fit) {
		return {
			note,
			f1Hz: null,
			f1Ci95Hz: null,
			inharmonicity: null,
			inharmonicityCi95: null,
			centsFromEqual: null
		};
	}
	const f1 = 2 * fit.f1Sd;
	const b = 2 * fit.inharmonicitySd;
	return {
		note,
		f1Hz: fit.f1Hz,
		f1Ci95Hz: [fit.f1Hz - f1, fit.f1Hz + f1],
		inharmonicity: fit.inharmonicity,
		inharmonicityCi95: [Math.max(0, fit.inharmonicity - b), fit.inharmonicity + b],
		centsFromEqual: centsBetween(fit.f1Hz, equalTemperamentHz(midi))
	};
}
