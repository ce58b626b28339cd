/** Where a clip is struck, and what in it forbids a measurement. */
export interface Strike {
	/** Sample index at which the sound begins. */
	sample: number;
	/** Sample index at which the usable sound ends (next strike, damper or end of clip). */
	endSample: number;
}

const BLOCK_SECONDS = 0.01;
/** Strikes nearer than this belong together: the two notes of an interval, played by hand. */
const TOGETHER_SECONDS = 0.6;
const RISE_DB = 9;
const LOUD_BELOW_MAX_DB = 24;
const SILENT_DB = -75;

function blockLevelsDb(samples: Float32Array, blockLength: number): Float64Array {
	const levels = new Float64Array(Math.floor(samples.length / blockLength));
	for (let b = 0; b < levels.length; b++) {
		let energy = 0;
		let mean = 0;
		for (let i = b * blockLength; i < (b + 1) * blockLength; i++) {
			energy += samples[i] * samples[i];
			mean += samples[i];
		}
		mean /= blockLength;
		levels[b] = 10 * Math.log10(energy / blockLength - mean * mean + 1e-20);
	}
	return levels;
}

/** Blocks where the level has risen by 9 dB over what sounded just before. */
function onsetBlocks(levels: Float64Array): number[] {
	const max = levels.reduce((a, b) => Math.max(a, b), -Infinity);
	const onsets: number[] = [];
	for (let b = 0; b < levels.length; b++) {
		if (levels[b] < max - LOUD_BELOW_MAX_DB) continue;
		let before = b === 0 ? -200 : -Infinity;
		for (let j = Math.max(0, b - 6); j < b - 1; j++) before = Math.max(before, levels[j]);
		if (before === -Infinity) before = levels[b - 1];
		if (levels[b] - before < RISE_DB) continue;
		if (onsets.length > 0 && b - onsets[onsets.length - 1] < 8) continue;
		onsets.push(b);
	}
	return onsets;
}

/**
 * The strike to measure: the last of the first group of strikes that leaves the longest sound
 * behind it. Null when the clip is silent or nothing in it rises like a struck string.
 */
export function findStrike(samples: Float32Array, sampleRateHz: number): Strike | null {
	const blockLength = Math.max(1, Math.round(BLOCK_SECONDS * sampleRateHz));
	const levels = blockLevelsDb(samples, blockLength);
	if (levels.length < 5) return null;
	const max = levels.reduce((a, b) => Math.max(a, b), -Infinity);
	if (max < SILENT_DB) return null;
	const onsets = onsetBlocks(levels);
	if (onsets.length === 0) return null;
	const together = TOGETHER_SECONDS / BLOCK_SECONDS;
	let best: Strike | null = null;
	for (let i = 0; i < onsets.length; i++) {
		const next = onsets[i + 1] ?? levels.length;
		if (onsets[i + 1] !== undefined && next - onsets[i] < together) continue;
		const last = onsets[i + 1] === undefined;
		const endSample = last ? samples.length : next * blockLength;
		const strike = { sample: onsets[i] * blockLength, endSample };
		if (!best || lengthOf(strike) > 1.5 * lengthOf(best)) best = strike;
	}
	return best;
}

function lengthOf(strike: Strike): number {
	return strike.endSample - strike.sample;
}

/**
 * Share of samples that sit at the clip's own ceiling in runs of three or more: a recording
 * driven into its limit. 0 for a clean clip.
 */
export function clippedShare(samples: Float32Array): number {
	let peak = 0;
	for (const value of samples) peak = Math.max(peak, Math.abs(value));
	if (peak < 0.02) return 0;
	const ceiling = peak * 0.9995;
	let run = 0;
	let clipped = 0;
	for (const value of samples) {
		if (Math.abs(value) >= ceiling) {
			run++;
			continue;
		}
		if (run >= 3) clipped += run;
		run = 0;
	}
	return clipped / samples.length;
}
