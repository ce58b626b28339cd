import type { SpectralPeak } from './spectrum';

/** A stiff string's partial frequencies: f_n = n·f0·sqrt(1 + B·n²). */
export interface Stiffness {
	f0Hz: number;
	inharmonicity: number;
}

/** A comb laid over the peaks of a spectrum. */
export interface CombMatch extends Stiffness {
	score: number;
	/** Number of partials with a peak at their place. */
	found: number;
}

export interface CombRange {
	lowF1Hz: number;
	highF1Hz: number;
	highestHz: number;
	maxPartials: number;
}

export function partialOf(string: Stiffness, n: number): number {
	return n * string.f0Hz * Math.sqrt(1 + string.inharmonicity * n * n);
}

const B_STEPS = 26;
const B_LOW = 2e-5;
/** Greatest B searched; the top octaves' short strings go far beyond (up to about 0.02). */
const B_HIGH = 4e-3;
const B_HIGH_TREBLE = 3e-2;
const TREBLE_HZ = 1000;

/** Weight of a peak: its height above the floor, compressed, so that no partial rules alone. */
function weightOf(peak: SpectralPeak): number {
	return Math.min(peak.aboveFloorDb, 45);
}

/** Index of the peak nearest to a frequency (peaks in rising frequency). */
export function nearestPeak(peaks: readonly SpectralPeak[], hz: number): number {
	let low = 0;
	let high = peaks.length - 1;
	if (high < 0) return -1;
	while (high - low > 1) {
		const middle = (low + high) >> 1;
		if (peaks[middle].frequencyHz < hz) low = middle;
		else high = middle;
	}
	return hz - peaks[low].frequencyHz < peaks[high].frequencyHz - hz ? low : high;
}

/**
 * Scores one comb: each partial adds the weight of the strongest nearby peak, less with
 * distance; a partial without a peak costs a little.
 */
export function scoreComb(
	peaks: readonly SpectralPeak[],
	string: Stiffness,
	range: CombRange,
	widthCents: number
): CombMatch {
	let score = 0;
	let found = 0;
	for (let n = 1; n <= range.maxPartials; n++) {
		const hz = partialOf(string, n);
		if (hz > range.highestHz) break;
		const tolerance = Math.max(0.8, hz * (2 ** (widthCents / 1200) - 1));
		const gain = bestNear(peaks, hz, tolerance);
		const importance = 1 / Math.sqrt(n);
		score += importance * (gain > 0 ? gain : -4);
		if (gain > 0) found++;
	}
	return { ...string, score, found };
}

function bestNear(peaks: readonly SpectralPeak[], hz: number, tolerance: number): number {
	let gain = 0;
	const middle = nearestPeak(peaks, hz);
	if (middle < 0) return 0;
	for (const step of [-1, 1]) {
		for (let i = step < 0 ? middle : middle + 1; i >= 0 && i < peaks.length; i += step) {
			const distance = Math.abs(peaks[i].frequencyHz - hz);
			if (distance > tolerance) break;
			gain = Math.max(gain, weightOf(peaks[i]) * (1 - 0.7 * (distance / tolerance) ** 2));
		}
	}
	return gain;
}

/**
 * The best comb with f_1 in a range and B between 2e-5 and 4e-3, above 1 kHz 3e-2 (or none): a
 * coarse grid, then a finer one around its best place.
 */
export function searchComb(peaks: readonly SpectralPeak[], range: CombRange): CombMatch | null {
	if (peaks.length === 0) return null;
	let best: CombMatch | null = null;
	const cents = 1200 * Math.log2(range.highF1Hz / range.lowF1Hz);
	const steps = Math.max(1, Math.ceil(cents / 3));
	const bSpan = (range.lowF1Hz > TREBLE_HZ ? B_HIGH_TREBLE : B_HIGH) / B_LOW;
	const consider = (f1Hz: number, inharmonicity: number, width: number): void => {
		const f0Hz = f1Hz / Math.sqrt(1 + inharmonicity);
		const match = scoreComb(peaks, { f0Hz, inharmonicity }, range, width);
		if (!best || match.score > best.score) best = match;
	};
	for (let i = 0; i <= steps; i++) {
		const f1Hz = range.lowF1Hz * (range.highF1Hz / range.lowF1Hz) ** (i / steps);
		for (let b = 0; b <= B_STEPS; b++) {
			consider(f1Hz, b === 0 ? 0 : B_LOW * bSpan ** ((b - 1) / (B_STEPS - 1)), 6);
		}
	}
	const coarse = best as CombMatch | null;
	if (!coarse || coarse.found === 0) return null;
	const ratio = bSpan ** (1 / (B_STEPS - 1));
	best = null;
	for (let i = -8; i <= 8; i++) {
		for (let b = -6; b <= 6; b++) {
			const inharmonicity = coarse.inharmonicity * ratio ** (b / 6);
			const f1Hz = coarse.f0Hz * Math.sqrt(1 + inharmonicity) * 2 ** (i / 2400);
			consider(f1Hz, inharmonicity, 3);
		}
	}
	return best;
}
