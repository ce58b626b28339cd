import { complexSpectrum, powerOfTwoAbove } from './fourier';

/** What a band holds besides the fitted components, seen within the pass band. */
export interface ResidualSpectrum {
	/** Frequency of the highest line, relative to the band's centre. */
	peakHz: number;
	/** Highest line over the level that white noise of this median would have on average. */
	peakOverMean: number;
	/** Noise variance per complex sample, as if the noise were white over the band's whole rate. */
	variance: number;
	/** The same, taken near one frequency: the greater of the mean and the local value. */
	varianceNear(hz: number): number;
}

/**
 * Periodogram of what is left within ±passHz. The variance comes from the median, so that a
 * remaining line does not pass for noise (an exponential distribution's median is ln 2 of its
 * mean).
 * @param rest interleaved complex residual
 */
export function residualSpectrum(
	rest: Float64Array,
	rateHz: number,
	passHz: number
): ResidualSpectrum {
	const samples = rest.length / 2;
	const size = powerOfTwoAbove(2 * samples);
	const padded = new Float64Array(2 * size);
	padded.set(rest);
	const bins = complexSpectrum(padded);
	const reach = Math.min(size / 2 - 1, Math.floor((passHz * size) / rateHz));
	const power = new Float64Array(2 * reach + 1);
	let peak = 0;
	for (let k = -reach; k <= reach; k++) {
		const slot = (k + size) % size;
		const value = (bins[2 * slot] ** 2 + bins[2 * slot + 1] ** 2) / samples;
		power[k + reach] = value;
		if (value > power[peak]) peak = k + reach;
	}
	const variance = medianOf(power) / Math.LN2;
	const near = (hz: number): number => {
		const middle = Math.round((hz * size) / rateHz) + reach;
		const width = Math.max(4, Math.round((1.5 * size) / rateHz));
		const part = power.subarray(Math.max(0, middle - width), middle + width + 1);
		return Math.max(variance, part.length > 0 ? part.reduce((a, b) => a + b, 0) / part.length : 0);
	};
	return {
		peakHz: ((peak - reach) * rateHz) / size,
		peakOverMean: variance > 0 ? power[peak] / variance : 0,
		variance,
		varianceNear: near
	};
}

export function medianOf(values: ArrayLike<number>): number {
	const sorted = Float64Array.from(values).sort();
	const half = sorted.length >> 1;
	if (sorted.length === 0) return 0;
	return sorted.length % 2 === 1 ? sorted[half] : (sorted[half - 1] + sorted[half]) / 2;
}

/**
 * The height over the mean that the highest line of white noise stays below in 99.9 % of cases:
 * of M independent lines the largest is about ln M plus an extreme-value tail (factor 1.3 for
 * the interpolated lines between them).
 */
export function whitePeakLimit(samples: number, rateHz: number, passHz: number): number {
	const lines = Math.max(2, (2 * passHz * samples) / rateHz);
	return Math.log(1.3 * lines) + 6.9;
}
