import { powerOfTwoAbove, realSpectrum } from './fourier';

/** A peak of a magnitude spectrum. */
export interface SpectralPeak {
	frequencyHz: number;
	/** Level in dB re full-scale sine. */
	levelDb: number;
	/** Height above the running floor in dB. */
	aboveFloorDb: number;
}

/** Magnitudes in dB re a full-scale sine. */
export interface LevelSpectrum {
	binHz: number;
	levelDb: Float64Array;
	/** Width of one line of the window used, between its first zeros, in hertz. */
	lineWidthHz: number;
}

const FLOOR_QUANTILE = 0.4;
const FLOOR_HALF_WIDTH_HZ = 160;
const SILENCE_DB = -200;

/**
 * Hann-windowed level spectrum of `samples[from..to)`, zero-padded at least twice so that a
 * parabola through three bins finds a peak to a few hundredths of a bin.
 */
export function levelSpectrum(
	samples: Float32Array,
	sampleRateHz: number,
	from: number,
	to: number
): LevelSpectrum {
	const length = Math.max(2, to - from);
	const size = powerOfTwoAbove(2 * length);
	const windowed = new Float64Array(length);
	for (let i = 0; i < length; i++) {
		const hann = 0.5 - 0.5 * Math.cos((2 * Math.PI * (i + 0.5)) / length);
		windowed[i] = (samples[from + i] ?? 0) * hann;
	}
	const bins = realSpectrum(windowed, size);
	const levelDb = new Float64Array(size / 2);
	const scale = 4 / length;
	for (let k = 0; k < levelDb.length; k++) {
		const magnitude = scale * Math.hypot(bins[2 * k], bins[2 * k + 1]);
		levelDb[k] = magnitude > 1e-10 ? 20 * Math.log10(magnitude) : SILENCE_DB;
	}
	return { binHz: sampleRateHz / size, levelDb, lineWidthHz: (4 * sampleRateHz) / length };
}

/** Running low quantile of the level over ±160 Hz: what lies between the lines of a tone. */
export function runningFloorDb(spectrum: LevelSpectrum): Float64Array {
	const { levelDb, binHz } = spectrum;
	const half = Math.max(8, Math.round(FLOOR_HALF_WIDTH_HZ / binHz));
	const step = Math.max(1, Math.round(half / 4));
	const knots: number[] = [];
	for (let centre = 0; centre < levelDb.length + step; centre += step) {
		const low = Math.max(0, centre - half);
		const part = levelDb.slice(low, Math.min(levelDb.length, centre + half)).sort();
		knots.push(part.length > 0 ? part[Math.floor(FLOOR_QUANTILE * part.length)] : SILENCE_DB);
	}
	const floor = new Float64Array(levelDb.length);
	for (let k = 0; k < floor.length; k++) {
		const at = k / step;
		const i = Math.floor(at);
		floor[k] = knots[i] + (at - i) * ((knots[i + 1] ?? knots[i]) - knots[i]);
	}
	return floor;
}

/**
 * Peaks at least `minAboveFloorDb` above the running floor, in rising frequency.
 * What a stronger line's side lobes or skirt could make is left out.
 */
export function findPeaks(
	spectrum: LevelSpectrum,
	lowHz: number,
	highHz: number,
	minAboveFloorDb = 12
): SpectralPeak[] {
	const { levelDb, binHz } = spectrum;
	const floor = runningFloorDb(spectrum);
	const peaks: SpectralPeak[] = [];
	const first = Math.max(1, Math.ceil(lowHz / binHz));
	const last = Math.min(levelDb.length - 2, Math.floor(highHz / binHz));
	for (let k = first; k <= last; k++) {
		const here = levelDb[k];
		if (here <= levelDb[k - 1] || here < levelDb[k + 1]) continue;
		if (here < floor[k] + minAboveFloorDb) continue;
		const curve = levelDb[k - 1] - 2 * here + levelDb[k + 1];
		const shift = curve < 0 ? (0.5 * (levelDb[k - 1] - levelDb[k + 1])) / curve : 0;
		peaks.push({
			frequencyHz: (k + shift) * binHz,
			levelDb: here - 0.25 * (levelDb[k - 1] - levelDb[k + 1]) * shift,
			aboveFloorDb: here - floor[k]
		});
	}
	return withoutSideLobes(peaks, spectrum.lineWidthHz);
}

/** A line that decays within the window has a skirt this much above the window's side lobes. */
const SKIRT_DB = 20;
/** Further down lie rounding errors of a tone without noise. */
const DEEPEST_DB = 110;

/**
 * Side lobes of a Hann window fall as 1/(π·d³), d in lines of the unpadded transform (Harris 1978,
 * Proc. IEEE 66:51); a quarter of the main lobe's width is one line.
 */
function withoutSideLobes(peaks: SpectralPeak[], lineWidthHz: number): SpectralPeak[] {
	const loudest = peaks.reduce((max, peak) => Math.max(max, peak.levelDb), -Infinity);
	const strong = peaks.filter((peak) => peak.levelDb > loudest - DEEPEST_DB);
	return strong.filter((peak) =>
		strong.every((other) => {
			const over = other.levelDb - peak.levelDb;
			if (over < 25) return true;
			const lines = Math.abs(other.frequencyHz - peak.frequencyHz) / (lineWidthHz / 4);
			if (lines < 6) return false;
			return over < 20 * Math.log10(Math.PI * lines ** 3) - SKIRT_DB;
		})
	);
}
