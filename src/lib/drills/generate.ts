import { DRILL_INTERVALS } from './catalogue';
import { intervalTrials } from './interval';
import {
	BLOCK_TRIALS,
	ENGINE_VERSION,
	type BlockOptions,
	type BlockSpec,
	type ScoredDrillId,
	type TrialSpec
} from './types';
import { unisonTrials } from './unison';

/** What a block is made of when nothing is chosen. */
export const DEFAULT_OPTIONS: Readonly<Record<ScoredDrillId, BlockOptions>> = {
	unison: { toleranceSet: 'learning', piano: 'varied' },
	interval: { toleranceSet: 'learning', piano: 'varied', intervals: DRILL_INTERVALS }
};

type Generator = (drill: ScoredDrillId, seed: number, options: BlockOptions) => TrialSpec[];

/** How each engine version draws its trials. A version that has been used is never changed. */
const GENERATORS: Readonly<Record<number, Generator>> = {
	1: (drill, seed, options) =>
		drill === 'unison'
			? unisonTrials(seed, options, BLOCK_TRIALS)
			: intervalTrials(seed, options, BLOCK_TRIALS)
};

/** True for a version whose blocks can be drawn and scored here. */
export function isKnownEngineVersion(version: number): boolean {
	return Object.hasOwn(GENERATORS, version);
}

/**
 * The ten trials of a block. The same drill, seed, options and engine version give the same block on
 * every machine.
 * @param seed whole number, 0 to 2^32 - 1
 * @throws RangeError for a seed out of range or an unknown engine version
 */
export function generateBlock(
	drill: ScoredDrillId,
	seed: number,
	options: BlockOptions = DEFAULT_OPTIONS[drill],
	engineVersion: number = ENGINE_VERSION
): BlockSpec {
	if (!Number.isInteger(seed) || seed < 0 || seed > 0xffffffff) {
		throw new RangeError('A seed is a whole number from 0 to 4294967295.');
	}
	if (!isKnownEngineVersion(engineVersion)) {
		throw new RangeError(`Engine version ${engineVersion} is not known here.`);
	}
	const canonical = canonicalOptions(drill, options);
	const trials = GENERATORS[engineVersion](drill, seed, canonical);
	return { drill, engineVersion, seed, options: canonical, trials };
}

/** Options as a stimulus carries them: intervals only for the interval drill, in the catalogue's order. */
function canonicalOptions(drill: ScoredDrillId, options: BlockOptions): BlockOptions {
	const { toleranceSet, piano } = options;
	if (drill === 'unison') return { toleranceSet, piano };
	const chosen = options.intervals ?? DRILL_INTERVALS;
	const intervals = DRILL_INTERVALS.filter((interval) => chosen.includes(interval));
	return { toleranceSet, piano, intervals: intervals.length > 0 ? intervals : DRILL_INTERVALS };
}
