import { inverseSpectrum, powerOfTwoAbove, realSpectrum } from './fourier';

/** A narrow band of the sound, moved to 0 Hz and sampled slowly: re, im interleaved. */
export interface BandSignal {
	/** Interleaved complex samples. */
	z: Float64Array;
	rateHz: number;
	/** Frequency that was moved to 0 Hz. */
	centreHz: number;
	/** Time of the first sample, in seconds from the start of the analysed clip. */
	startSeconds: number;
	/** Half width within which the band is true to the sound. */
	passHz: number;
}

export interface BandShape {
	passHz: number;
	stopHz: number;
}

/** The whole clip's spectrum, from which any number of bands is cut cheaply. */
export interface ClipSpectrum {
	bins: Float64Array;
	size: number;
	sampleRateHz: number;
	lengthSamples: number;
	/** Factor from the clip's rate to the bands' rate, a power of two. */
	decimation: number;
}

const STOPBAND_DB = 80;
const MIN_BAND_RATE_HZ = 80;
const WIDEST: BandShape = { passHz: 20, stopHz: 73 };

/** Spectrum of a clip (at most about 20 s), padded so that no band wraps around. */
export function clipSpectrum(samples: Float32Array, sampleRateHz: number): ClipSpectrum {
	const decimation = 2 ** Math.max(0, Math.floor(Math.log2(sampleRateHz / MIN_BAND_RATE_HZ)));
	const size = powerOfTwoAbove(samples.length + 0.6 * sampleRateHz);
	const bins = realSpectrum(Float64Array.from(samples), size);
	return { bins, size, sampleRateHz, lengthSamples: samples.length, decimation };
}

/**
 * The band's shape where the nearest other partial lies `spacingHz` away: as wide as ±20 Hz,
 * narrower among close neighbours.
 */
export function bandShape(spacingHz: number): BandShape {
	if (spacingHz >= 82) return WIDEST;
	const passHz = Math.min(WIDEST.passHz, 0.35 * spacingHz);
	return { passHz, stopHz: Math.min(WIDEST.stopHz, Math.max(0.9 * spacingHz, passHz + 8)) };
}

const KAISER_BETA = 0.1102 * (STOPBAND_DB - 8.7);

/** Length in seconds of the Kaiser low-pass with this shape and 80 dB in the stop band. */
export function filterSeconds(shape: BandShape): number {
	return (STOPBAND_DB - 7.95) / (14.357 * (shape.stopHz - shape.passHz));
}

/** Fourier transform of the unit Kaiser window of length `seconds` at `hz`, unnormalised. */
function kaiserTransform(hz: number, seconds: number): number {
	const x = Math.PI * hz * seconds;
	const inside = KAISER_BETA * KAISER_BETA - x * x;
	if (inside > 1e-9) return Math.sinh(Math.sqrt(inside)) / Math.sqrt(inside);
	if (inside < -1e-9) return Math.sin(Math.sqrt(-inside)) / Math.sqrt(-inside);
	return 1;
}

const responses = new Map<string, Float64Array>();

/**
 * Response of the windowed-sinc low-pass at bins 0..K: the integral of the window's transform
 * over the pass band around each frequency (Kaiser 1974 window design).
 */
function lowPassResponse(shape: BandShape, binHz: number): Float64Array {
	const key = `${shape.passHz.toFixed(4)}|${shape.stopHz.toFixed(4)}|${binHz}`;
	const known = responses.get(key);
	if (known) return known;
	const seconds = filterSeconds(shape);
	const cutoff = (shape.passHz + shape.stopHz) / 2;
	const reach = Math.ceil(shape.stopHz / binHz) + 2;
	const stepHz = binHz;
	const span = Math.ceil((cutoff + 25 / seconds) / stepHz) + reach;
	const cumulative = new Float64Array(2 * span + 2);
	for (let i = 1; i < cumulative.length; i++) {
		const a = kaiserTransform((i - 1 - span) * stepHz, seconds);
		const middle = kaiserTransform((i - 0.5 - span) * stepHz, seconds);
		const b = kaiserTransform((i - span) * stepHz, seconds);
		cumulative[i] = cumulative[i - 1] + ((a + 4 * middle + b) * stepHz) / 6;
	}
	const total = cumulative[cumulative.length - 1];
	const at = (hz: number): number => {
		const x = Math.min(Math.max(hz / stepHz + span, 0), cumulative.length - 1);
		const i = Math.min(Math.floor(x), cumulative.length - 2);
		return cumulative[i] + (x - i) * (cumulative[i + 1] - cumulative[i]);
	};
	const response = new Float64Array(reach);
	for (let k = 0; k < reach; k++) {
		response[k] = (at(k * binHz + cutoff) - at(k * binHz - cutoff)) / total;
	}
	if (responses.size > 200) responses.clear();
	responses.set(key, response);
	return response;
}

/**
 * The band around `centreHz`, fully covered by sound from `fromSeconds` to `toSeconds` of the
 * clip: the filter's whole length lies inside, so damped sinusoids pass exactly.
 * The signal is analytic: a sine of amplitude A has magnitude A here.
 * @returns null when fewer than 16 samples remain.
 */
export function extractBand(
	clip: ClipSpectrum,
	centreHz: number,
	shape: BandShape,
	fromSeconds: number,
	toSeconds: number
): BandSignal | null {
	const { size, sampleRateHz, decimation, bins } = clip;
	const binHz = sampleRateHz / size;
	const outSize = size / decimation;
	const response = lowPassResponse(shape, binHz);
	const centreBin = Math.round(centreHz / binHz);
	const folded = new Float64Array(2 * outSize);
	for (let k = 1 - response.length; k < response.length; k++) {
		const bin = centreBin + k;
		if (bin <= 0 || bin >= size / 2) continue;
		const gain = (2 / decimation) * response[Math.abs(k)];
		const slot = ((k % outSize) + outSize) % outSize;
		folded[2 * slot] += gain * bins[2 * bin];
		folded[2 * slot + 1] += gain * bins[2 * bin + 1];
	}
	const rateHz = sampleRateHz / decimation;
	const half = filterSeconds(shape) / 2;
	const first = Math.ceil((fromSeconds + half) * rateHz);
	const last = Math.floor((Math.min(toSeconds, clip.lengthSamples / sampleRateHz) - half) * rateHz);
	if (last - first < 16) return null;
	return {
		z: inverseSpectrum(folded).slice(2 * first, 2 * (last + 1)),
		rateHz,
		centreHz: centreBin * binHz,
		startSeconds: first / rateHz,
		passHz: shape.passHz
	};
}
