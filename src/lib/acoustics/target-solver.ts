import { factorInPlace, solveFactored } from './cholesky';
import { enforce, type Row } from './inequalities';
import { interpolate, interpolateWithin } from './interpolation';
import { partialStretchCents } from './stiff-string';
import {
	CLEAN_OCTAVES,
	CURVE_PARTIAL,
	CURVE_WEIGHT,
	RISING_RUNS,
	SERIES_WEIGHTS,
	TEMPERED,
	type OctaveTypeWeight,
	type TargetStyle
} from './target-styles';
import {
	A4_MIDI,
	HIGHEST_MIDI,
	LOWEST_MIDI,
	centsBetween,
	equalTemperamentHz,
	type Cents,
	type Midi
} from './units';

const NOTES = HIGHEST_MIDI - LOWEST_MIDI + 1;
/** Keeps the matrix definite where nothing else speaks; far below any effect. */
const RIDGE = 1e-7;

/** Which partials of which interval a width is about. */
interface WidthOf {
	lowerPartial: number;
	upperPartial: number;
	semitones: number;
}

/**
 * Part of an interval's width at a coincident pair that does not depend on the tuning:
 * 100·s + 1200·log2(q/p) + o_q(high) − o_p(low), cents. The whole width is
 * δ = this + x_high − x_low, wide > 0.
 */
function fixedWidth(of: WidthOf, low: Midi, inharmonicity: readonly number[]): Cents {
	return (
		100 * of.semitones +
		1200 * Math.log2(of.upperPartial / of.lowerPartial) +
		partialStretchCents(of.upperPartial, inharmonicity[low + of.semitones - LOWEST_MIDI]) -
		partialStretchCents(of.lowerPartial, inharmonicity[low - LOWEST_MIDI])
	);
}

/** Row for Σ factor_k·δ(low_k) = 0 (the fixed parts move to the right-hand side). */
function widthRow(
	of: WidthOf,
	lows: readonly (readonly [Midi, number])[],
	inharmonicity: readonly number[]
): Row {
	const row: Row = { index: [], coefficient: [], value: 0 };
	for (const [low, factor] of lows) {
		row.index.push(low + of.semitones - LOWEST_MIDI, low - LOWEST_MIDI);
		row.coefficient.push(factor, -factor);
		row.value -= factor * fixedWidth(of, low, inharmonicity);
	}
	return row;
}

function addWeighted(matrix: Float64Array, right: Float64Array, row: Row, weight: number): void {
	for (let a = 0; a < row.index.length; a += 1) {
		const scaled = weight * row.coefficient[a];
		right[row.index[a]] += scaled * row.value;
		for (let b = 0; b < row.index.length; b += 1) {
			matrix[row.index[a] * NOTES + row.index[b]] += scaled * row.coefficient[b];
		}
	}
}

function addOctaves(
	matrix: Float64Array,
	right: Float64Array,
	style: TargetStyle,
	inharmonicity: readonly number[]
): void {
	for (const type of style.octaves) {
		for (let low = LOWEST_MIDI; low + type.semitones <= HIGHEST_MIDI; low += 1) {
			const weight = interpolateWithin(type.weight, low);
			if (weight > 0) addWeighted(matrix, right, widthRow(type, [[low, 1]], inharmonicity), weight);
		}
	}
}

function addSmoothness(
	matrix: Float64Array,
	right: Float64Array,
	inharmonicity: readonly number[]
): void {
	for (const run of SERIES_WEIGHTS) {
		for (let low = run.firstLow + 1; low < run.lastLow; low += 1) {
			const lows = [
				[low - 1, 1],
				[low, -2],
				[low + 1, 1]
			] as const;
			addWeighted(matrix, right, widthRow(run, lows, inharmonicity), run.weight);
		}
	}
	for (let midi = LOWEST_MIDI + 1; midi < HIGHEST_MIDI; midi += 1) {
		const partial = Math.round(interpolate(CURVE_PARTIAL, midi));
		const at = midi - LOWEST_MIDI;
		const stretch = [at - 1, at, at + 1].map((i) => partialStretchCents(partial, inharmonicity[i]));
		const row: Row = {
			index: [at - 1, at, at + 1],
			coefficient: [1, -2, 1],
			value: -(stretch[0] - 2 * stretch[1] + stretch[2])
		};
		addWeighted(matrix, right, row, interpolateWithin(CURVE_WEIGHT, midi));
	}
}

/** The width of a clean octave of the temperament stays between two limits, in cents. */
function cleanOctaveRows(type: OctaveTypeWeight, inharmonicity: readonly number[]): Row[] {
	const rows: Row[] = [];
	for (let low = CLEAN_OCTAVES.firstLow; low <= CLEAN_OCTAVES.lastLow; low += 1) {
		const partialHz = type.lowerPartial * equalTemperamentHz(low);
		const most = centsBetween(partialHz + CLEAN_OCTAVES.mostBeatHz, partialHz);
		for (const sign of [1, -1]) {
			const row = widthRow(type, [[low, sign]], inharmonicity);
			rows.push({ ...row, value: row.value - most });
		}
	}
	return rows;
}

/**
 * Inequalities as rows Σ c·x ≥ value: clean octaves in the temperament, runs that rise, fifths
 * narrow and fourths wide.
 */
function constraintRows(style: TargetStyle, inharmonicity: readonly number[]): Row[] {
	const rows = cleanOctaveRows(style.octaves[0], inharmonicity);
	const growth = 1.02 * 2 ** (-1 / 12);
	for (const run of RISING_RUNS) {
		for (let low = run.firstLow; low < run.lastLow; low += 1) {
			const row = widthRow(
				run,
				[
					[low + 1, 1],
					[low, -growth]
				],
				inharmonicity
			);
			rows.push({ ...row, value: row.value + 0.01 });
		}
	}
	for (let low = TEMPERED.firstLow; low <= TEMPERED.lastLow; low += 1) {
		const fifth = { lowerPartial: 3, upperPartial: 2, semitones: 7 };
		const fourth = { lowerPartial: 4, upperPartial: 3, semitones: 5 };
		const narrow = widthRow(fifth, [[low, -1]], inharmonicity);
		const wide = widthRow(fourth, [[low, 1]], inharmonicity);
		rows.push({ ...narrow, value: narrow.value + TEMPERED.leastCents });
		rows.push({ ...wide, value: wide.value + TEMPERED.leastCents });
	}
	return rows;
}

/**
 * Target tuning of a stiff-stringed piano: cents of f1 above equal temperament for A0 to C8, A4
 * exactly 0. One linear least-squares problem (octave types near beatless, runs of intervals and
 * the curve smooth) solved by Cholesky, then the inequalities.
 * @param inharmonicity B of the 88 notes, A0 first, each 0 upwards
 * @returns 88 values; exactly 0 everywhere when every B is 0
 */
export function solveStretch(inharmonicity: readonly number[], style: TargetStyle): Float64Array {
	const matrix = new Float64Array(NOTES * NOTES);
	const right = new Float64Array(NOTES);
	for (let i = 0; i < NOTES; i += 1) matrix[i * NOTES + i] = RIDGE;
	addOctaves(matrix, right, style, inharmonicity);
	addSmoothness(matrix, right, inharmonicity);
	pin(matrix, right, A4_MIDI - LOWEST_MIDI);
	factorInPlace(matrix, NOTES);
	const x = solveFactored(matrix, NOTES, right);
	const rows = constraintRows(style, inharmonicity);
	return enforce(x, rows, (row) => solveFactored(matrix, NOTES, denseRow(row)));
}

/** A row as a vector over all notes; A4 does not move, whatever pulls at it. */
function denseRow(row: Row): Float64Array {
	const dense = new Float64Array(NOTES);
	row.index.forEach((index, k) => {
		if (index !== A4_MIDI - LOWEST_MIDI) dense[index] += row.coefficient[k];
	});
	return dense;
}

/** Takes an unknown out of the problem at the value 0. */
function pin(matrix: Float64Array, right: Float64Array, at: number): void {
	for (let i = 0; i < NOTES; i += 1) {
		matrix[at * NOTES + i] = 0;
		matrix[i * NOTES + at] = 0;
	}
	matrix[at * NOTES + at] = 1;
	right[at] = 0;
}
