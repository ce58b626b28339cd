import { decodeAudio } from './decode';
import { measureClip } from './dsp/measure-clip';
import { shorelineDb } from './dsp/shoreline';
import { findStrike } from './dsp/strike';
import { noteDoubt } from './note-doubt';
import { recordingFacts, type RecordingFacts } from './recording-facts';
import type { MeasureOptions, MeasureResult } from './types';

/** Loudness over time of one pair of partials, from the strike on. */
export interface PairShore {
	lowerPartial: number;
	upperPartial: number;
	timesS: number[];
	levelDb: number[];
}

/** Everything the page shows of one clip: numbers only, no sound. */
export interface Analysis {
	result: MeasureResult;
	/** a question when the sound is rather another note's than the one named, else null */
	doubt: string | null;
	recording: RecordingFacts;
	sampleRateHz: number;
	/** one for each pair of partials in the result, in its order */
	shores: PairShore[];
}

/** Shores are drawn up to this long after the strike. */
const SHORE_SECONDS = 8;
const SHORE_STEP_SECONDS = 0.02;

function shoresOf(tone: Float32Array, sampleRateHz: number, result: MeasureResult): PairShore[] {
	const shores: PairShore[] = [];
	for (const { lowerPartial, upperPartial, frequencyHz } of result.pairs) {
		const drawn = shores.some(
			(s) => s.lowerPartial === lowerPartial && s.upperPartial === upperPartial
		);
		if (drawn) continue;
		const trace = shorelineDb(tone, sampleRateHz, frequencyHz, { stepSeconds: SHORE_STEP_SECONDS });
		shores.push({
			lowerPartial,
			upperPartial,
			timesS: Array.from(trace.timesS),
			levelDb: Array.from(trace.levelDb)
		});
	}
	return shores;
}

/**
 * Measures one clip: 8 to 192 kHz, a strike somewhere in it, at most 8 s from it used.
 * @param strikeSample where the strike is, when the recorder already knows
 */
export function analyseSamples(
	samples: Float32Array,
	sampleRateHz: number,
	options: MeasureOptions,
	strikeSample?: number
): Analysis {
	const found = findStrike(samples, sampleRateHz);
	const strike = strikeSample ?? found?.sample ?? 0;
	const result = measureClip(samples, sampleRateHz, options);
	const { kind, notes } = options;
	const single = found && kind !== 'interval' && notes?.length === 1;
	const doubt = single ? noteDoubt(samples, sampleRateHz, found, notes[0]) : null;
	const seconds = Math.min(SHORE_SECONDS, options.seconds ?? SHORE_SECONDS);
	const tone = samples.subarray(strike, strike + Math.round(seconds * sampleRateHz));
	return {
		result,
		doubt,
		recording: recordingFacts(samples, sampleRateHz, strike),
		sampleRateHz,
		shores: shoresOf(tone, sampleRateHz, result)
	};
}

/**
 * Decodes and measures a sound file.
 * @throws AudioRefusedError when the file is not accepted
 */
export async function analyseFile(bytes: Uint8Array, options: MeasureOptions): Promise<Analysis> {
	const { samples, sampleRateHz } = await decodeAudio(bytes);
	return analyseSamples(samples, sampleRateHz, options);
}
