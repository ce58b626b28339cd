import type { ShorelineOptions, ShorelineTrace } from '../types';
import { bandShape, clipSpectrum, extractBand, filterSeconds } from './band';

const LOWEST_DB = -120;

/**
 * Level over time of the band around one frequency: the picture of a beat.
 * @param samples mono, any length up to about 20 s
 * @param frequencyHz centre of the band, above 0 and below half the sample rate
 * @returns empty arrays when the clip is shorter than the band's filter
 */
export function shorelineDb(
	samples: Float32Array,
	sampleRateHz: number,
	frequencyHz: number,
	options: ShorelineOptions = {}
): ShorelineTrace {
	const halfWidthHz = options.halfWidthHz ?? 20;
	const stepSeconds = options.stepSeconds ?? 0.02;
	const shape = bandShape(Math.min(82, halfWidthHz / 0.35));
	// Silence before and after, so that the picture spans the whole clip.
	const pad = Math.ceil((filterSeconds(shape) / 2 + 0.05) * sampleRateHz);
	const padded = new Float32Array(samples.length + 2 * pad);
	padded.set(samples, pad);
	const clip = clipSpectrum(padded, sampleRateHz);
	const band = extractBand(clip, frequencyHz, shape, 0, padded.length / sampleRateHz);
	if (!band) return { timesS: new Float32Array(0), levelDb: new Float32Array(0) };
	const count = Math.floor(samples.length / sampleRateHz / stepSeconds) + 1;
	const timesS = new Float32Array(count);
	const levelDb = new Float32Array(count);
	const offset = pad / sampleRateHz - band.startSeconds;
	for (let i = 0; i < count; i++) {
		timesS[i] = i * stepSeconds;
		const at = (i * stepSeconds + offset) * band.rateHz;
		levelDb[i] = levelAt(band.z, at);
	}
	return { timesS, levelDb };
}

function levelAt(z: Float64Array, at: number): number {
	const n = Math.min(Math.max(Math.floor(at), 0), z.length / 2 - 2);
	const share = Math.min(Math.max(at - n, 0), 1);
	const re = z[2 * n] + share * (z[2 * n + 2] - z[2 * n]);
	const im = z[2 * n + 1] + share * (z[2 * n + 3] - z[2 * n + 1]);
	return Math.max(LOWEST_DB, 20 * Math.log10(Math.hypot(re, im) + 1e-12));
}
