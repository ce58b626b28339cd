import { levelDb } from './strike-detector';

/** What a recording is worth, before anything is measured in it. */
export interface RecordingFacts {
	/** seconds from the strike to the end */
	secondsAfterStrike: number;
	/** largest absolute sample, 1 = full scale */
	peak: number;
	/** samples in flat tops: three or more in a row within 0.1 % of the peak */
	clippedSamples: number;
	clipped: boolean;
	/** level 0.1 to 0.6 s after the strike over the level before it, in dB; null with nothing before */
	aboveRoomDb: number | null;
	/** too little to measure: less than 20 dB above the room, or a peak below −46 dB re full scale */
	quiet: boolean;
}

const QUIET_PEAK = 0.005;
const QUIET_ABOVE_ROOM_DB = 20;
/** A few flat tops can be chance in a pure low tone; a clipped blow has dozens. */
const CLIPPED_LEAST = 12;
const ROOM_LEAST_SECONDS = 0.1;

function meanSquare(samples: Float32Array, from: number, to: number): number {
	let sum = 0;
	for (let i = from; i < to; i++) sum += samples[i] * samples[i];
	return to > from ? sum / (to - from) : 0;
}

/**
 * Samples in flat tops. Tops are looked for only when the peak is at least half of full scale: a
 * converter clips at its end, not in the middle.
 */
export function countClippedSamples(samples: Float32Array, peak: number): number {
	if (peak < 0.5) return 0;
	const limit = 0.999 * peak;
	let clipped = 0;
	let run = 0;
	let side = 0;
	for (let i = 0; i <= samples.length; i++) {
		const x = i < samples.length ? samples[i] : 0;
		const now = x >= limit ? 1 : x <= -limit ? -1 : 0;
		if (now !== 0 && now === side) {
			run++;
			continue;
		}
		if (run >= 3) clipped += run;
		run = now === 0 ? 0 : 1;
		side = now;
	}
	return clipped;
}

/** @param strikeSample index of the strike, 0 when the clip begins with it */
export function recordingFacts(
	samples: Float32Array,
	sampleRateHz: number,
	strikeSample: number
): RecordingFacts {
	let peak = 0;
	for (const x of samples) peak = Math.max(peak, Math.abs(x));
	const clippedSamples = countClippedSamples(samples, peak);
	const at = (seconds: number) =>
		Math.min(samples.length, strikeSample + Math.round(seconds * sampleRateHz));
	const tone = levelDb(meanSquare(samples, at(0.1), at(0.6)));
	const roomEnd = Math.max(0, strikeSample - Math.round(0.02 * sampleRateHz));
	const hasRoom = roomEnd >= ROOM_LEAST_SECONDS * sampleRateHz;
	const aboveRoomDb = hasRoom ? tone - levelDb(meanSquare(samples, 0, roomEnd)) : null;
	return {
		secondsAfterStrike: (samples.length - strikeSample) / sampleRateHz,
		peak,
		clippedSamples,
		clipped: clippedSamples >= CLIPPED_LEAST,
		aboveRoomDb,
		quiet: peak < QUIET_PEAK || (aboveRoomDb !== null && aboveRoomDb < QUIET_ABOVE_ROOM_DB)
	};
}
