import type { Shore } from '$lib/components/charts/shore';
import type { OddOneTrialSpec } from '$lib/drills/types';
import type { ToneEngine } from '$lib/synthesis/types';

export type ToneIndex = 0 | 1 | 2;
export const TONES: readonly ToneIndex[] = [0, 1, 2];

/** How long each tone sounds and the rest after it, in milliseconds. */
export const TONE_MS = 2800;
export const REST_MS = 450;

/** What is shown once an answer is given. */
export interface TrialReveal {
	readonly answer: ToneIndex;
	readonly note: string;
	/** Which partial is shown, and its frequency. */
	readonly partial: number;
	readonly partialHz: number;
	/** Beats per second heard there. */
	readonly rateHz: number;
	/** Cents between the two strings of the tone that beats. */
	readonly spreadCents: number;
	readonly seconds: number;
	readonly shores: readonly Shore[];
}

/** What the trial needs from outside; nothing of it is loaded before somebody wants to listen. */
export interface TrialParts {
	createEngine(): Promise<ToneEngine>;
	trial(seed: number): OddOneTrialSpec;
	strike(engine: ToneEngine, trial: OddOneTrialSpec, tone: ToneIndex): void;
	damp(engine: ToneEngine, tone: ToneIndex): void;
	reveal(trial: OddOneTrialSpec): TrialReveal;
}
