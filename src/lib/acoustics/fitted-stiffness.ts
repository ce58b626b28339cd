import { factorInPlace, solveFactored } from './cholesky';
import { HIGHEST_MIDI, LOWEST_MIDI, type Midi } from './units';

/** A note whose inharmonicity was measured. */
export interface MeasuredStiffness {
	midi: Midi;
	/** B, above 0. */
	inharmonicity: number;
}

const NOTES = HIGHEST_MIDI - LOWEST_MIDI + 1;
/** How much smoothness counts against the measured values, both in log B. */
const SMOOTHNESS = 10;
/** Keeps the problem definite on a side of the break where only one note was measured. */
const RIDGE = 1e-9;

/**
 * Stiffness of a whole piano from some measured notes: log B smoothed by second differences,
 * free to step at the break where the wound strings end. Some eighteen notes, every fifth one and
 * both sides of the break, are enough.
 * @param lastWound last note with wound strings, or null when not known (then no step is allowed)
 * @returns B of the 88 notes, A0 first; null with fewer than two measured notes (on each side of
 *   the break, if one is given) or a value that is not above 0
 */
export function fitStiffness(
	measured: readonly MeasuredStiffness[],
	lastWound: Midi | null
): number[] | null {
	if (measured.some(({ inharmonicity }) => !(inharmonicity > 0))) return null;
	const below = measured.filter(({ midi }) => lastWound !== null && midi <= lastWound).length;
	const above = measured.length - below;
	if (above < 2 || (lastWound !== null && below < 2)) return null;
	const matrix = new Float64Array(NOTES * NOTES);
	const right = new Float64Array(NOTES);
	const mean =
		measured.reduce((sum, { inharmonicity }) => sum + Math.log(inharmonicity), 0) / measured.length;
	for (let i = 0; i < NOTES; i += 1) matrix[i * NOTES + i] = RIDGE;
	for (const { midi, inharmonicity } of measured) {
		const at = midi - LOWEST_MIDI;
		matrix[at * NOTES + at] += 1;
		right[at] += Math.log(inharmonicity) - mean;
	}
	for (let at = 1; at < NOTES - 1; at += 1) {
		const midi = at + LOWEST_MIDI;
		if (lastWound !== null && (midi === lastWound || midi === lastWound + 1)) continue;
		addSecondDifference(matrix, at);
	}
	factorInPlace(matrix, NOTES);
	return Array.from(solveFactored(matrix, NOTES, right), (value) => Math.exp(value + mean));
}

function addSecondDifference(matrix: Float64Array, at: number): void {
	const coefficients = [1, -2, 1];
	for (let a = 0; a < 3; a += 1) {
		for (let b = 0; b < 3; b += 1) {
			matrix[(at - 1 + a) * NOTES + at - 1 + b] += SMOOTHNESS * coefficients[a] * coefficients[b];
		}
	}
}
