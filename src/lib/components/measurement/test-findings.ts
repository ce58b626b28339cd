import type { MeasureResult, NoteMeasure, PairMeasure } from '../../measurement/types';
import type { Asked } from './sentences';
import type { Finding } from './string-check.svelte';

/** Builders of results for the tests of this folder. */
export function note(
	name: string,
	f1Hz: number,
	b = 0.0003,
	more: Partial<NoteMeasure> = {}
): NoteMeasure {
	return {
		note: name,
		f1Hz,
		f1Ci95Hz: [f1Hz - 0.01, f1Hz + 0.01],
		inharmonicity: b,
		inharmonicityCi95: [0.99 * b, 1.01 * b],
		centsFromEqual: 0,
		...more
	};
}

export function pair(
	lower: number,
	upper: number,
	hz: number,
	more: Partial<PairMeasure> = {}
): PairMeasure {
	return {
		lowerPartial: lower,
		upperPartial: upper,
		frequencyHz: hz,
		verdict: 'not-measurable',
		tier: null,
		beatRateHz: null,
		ci95Hz: null,
		windowSeconds: [0.2, 2.7],
		reason: 'This partial is too weak here.',
		...more
	};
}

export function beating(
	lower: number,
	upper: number,
	hz: number,
	rate: number,
	half: number,
	more: Partial<PairMeasure> = {}
): PairMeasure {
	return pair(lower, upper, hz, {
		verdict: 'beating',
		tier: 'firm',
		beatRateHz: rate,
		ci95Hz: [rate - half, rate + half],
		reason: null,
		...more
	});
}

export function finding(asked: Partial<Asked>, result: Partial<MeasureResult>): Finding {
	const base = { kind: 'interval', lowMidi: 57, highMidi: 62, seconds: 4 } as const;
	return {
		asked: { ...base, ...asked },
		pianoId: 'medium-grand',
		source: 'microphone',
		microphone: {
			sampleRateHz: 48_000,
			echoCancellation: false,
			noiseSuppression: false,
			autoGainControl: false,
			label: 'built-in',
			processed: false
		},
		restarts: 0,
		analysis: {
			result: { notes: [], pairs: [], advice: [], ...result },
			doubt: null,
			recording: {
				secondsAfterStrike: 4,
				peak: 0.5,
				clippedSamples: 0,
				clipped: false,
				aboveRoomDb: 38,
				quiet: false
			},
			sampleRateHz: 48_000,
			shores: []
		}
	};
}
