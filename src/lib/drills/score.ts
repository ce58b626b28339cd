import { scoreInterval } from './interval-score';
import type { BlockResult, BlockSpec, RawTrial, TrialResult, TrialSpec } from './types';
import { ENGINE_VERSION } from './types';
import { scoreUnison } from './unison-score';

export interface Scorer {
	scoreTrial(spec: TrialSpec, raw: RawTrial): TrialResult;
	/** The block's score from its trials' results; smaller is better. */
	blockScore(trials: readonly TrialResult[]): number;
}

/**
 * How each engine version scores. A version that attempts were made with is never changed: new rules
 * get a new number, and old attempts keep their score.
 */
export const scorers: Readonly<Record<number, Scorer>> = {
	1: {
		scoreTrial: (spec, raw) =>
			spec.drill === 'unison' ? scoreUnison(spec, raw) : scoreInterval(spec, raw),
		blockScore: (trials) => median(trials.map(({ errorCents }) => Math.abs(errorCents)))
	}
};

function scorerOf(engineVersion: number): Scorer {
	const scorer = scorers[engineVersion];
	if (!scorer) throw new RangeError(`Engine version ${engineVersion} is not known here.`);
	return scorer;
}

/** One trial by the rules of an engine version. The raw trial must belong to the stimulus. */
export function scoreTrial(
	spec: TrialSpec,
	raw: RawTrial,
	engineVersion: number = ENGINE_VERSION
): TrialResult {
	return scorerOf(engineVersion).scoreTrial(spec, raw);
}

/**
 * A block by the rules of its own engine version. `raws` stand in the order of the block's trials;
 * a block under way is scored over the trials there are.
 * @returns medians NaN when there is no trial
 */
export function scoreBlock(block: BlockSpec, raws: readonly RawTrial[]): BlockResult {
	const scorer = scorerOf(block.engineVersion);
	const trials = raws.map((raw, index) => scorer.scoreTrial(block.trials[index], raw));
	const errors = trials.map(({ errorCents }) => errorCents);
	return {
		drill: block.drill,
		engineVersion: block.engineVersion,
		score: scorer.blockScore(trials),
		medianAbsErrorCents: median(errors.map(Math.abs)),
		medianSignedCents: median(errors),
		inside: trials.filter(({ inside }) => inside).length,
		count: trials.length,
		helps: sum(trials.map(({ helps }) => helps)),
		checks: sum(trials.map(({ checks }) => checks)),
		rightRateWrongSide: trials.filter(
			(trial) => trial.drill === 'interval' && trial.rightRateWrongSide
		).length,
		trials
	};
}

/** The middle value, or the mean of the two middle ones; NaN of nothing. */
export function median(values: readonly number[]): number {
	if (values.length === 0) return Number.NaN;
	const sorted = [...values].sort((a, b) => a - b);
	const half = Math.floor(sorted.length / 2);
	return sorted.length % 2 === 1 ? sorted[half] : (sorted[half - 1] + sorted[half]) / 2;
}

function sum(values: readonly number[]): number {
	return values.reduce((total, value) => total + value, 0);
}
