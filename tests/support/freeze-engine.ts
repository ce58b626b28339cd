/**
 * Writes down what the present engine version draws and how it scores, for
 * `fixtures/golden/engine/N.json`. Run once, when a new version is ready and before anybody plays it:
 * `npx tsx --tsconfig .config/tsconfig.cli.json tests/support/freeze-engine.ts > fixtures/golden/engine/N.json`.
 * The file of a version that has been played is never written again.
 */
import { createRandom } from '../../src/lib/acoustics/random';
import { DEFAULT_OPTIONS, generateBlock } from '../../src/lib/drills/generate';
import { scoreBlock } from '../../src/lib/drills/score';
import {
	LEARNER_PROFILES,
	personAfter,
	simulateAttempt
} from '../../src/lib/drills/simulation/learner';
import {
	ENGINE_VERSION,
	type BlockOptions,
	type RawTrial,
	type ScoredDrillId
} from '../../src/lib/drills/types';

/** Where the string is left in each trial of a frozen block: inside, outside, locked, wrong side. */
const LEFT_AT = [-12, -2.5, -1, -0.35, 0, 0.05, 0.6, 1.5, 4, 12];

function frozenBlock(drill: ScoredDrillId, seed: number, options: BlockOptions) {
	const block = generateBlock(drill, seed, options);
	const trials = block.trials.map((spec, index): RawTrial => ({
		index,
		startCents: spec.startCents,
		trace: [
			[500, 'strike', spec.startCents],
			[900, 'help', spec.startCents]
		],
		committedCents: LEFT_AT[index],
		committedAtMs: 9000 + index
	}));
	return { block, trials, result: scoreBlock(block, trials) };
}

function frozenAttempt(drill: ScoredDrillId, seed: number, blocks: number) {
	const attempt = simulateAttempt(createRandom(seed), {
		drill,
		startedMs: Date.UTC(2026, 0, 5, 17),
		person: personAfter(LEARNER_PROFILES.steady, blocks),
		device: {
			sampleRateHz: 48_000,
			outputLatencySeconds: 0.02,
			userAgentClass: 'desktop-chromium'
		},
		toleranceSet: 'working'
	});
	return { attempt, result: scoreBlock(attempt.stimulus, attempt.trials) };
}

const { unison, interval } = DEFAULT_OPTIONS;
const frozen = {
	engineVersion: ENGINE_VERSION,
	blocks: [
		frozenBlock('unison', 1, unison),
		frozenBlock('unison', 4_294_967_295, { ...unison, piano: 'short-upright' }),
		frozenBlock('interval', 1, interval),
		frozenBlock('interval', 20_261_201, {
			toleranceSet: 'concert',
			piano: 'long-grand',
			intervals: ['fifth', 'major-sixth']
		})
	],
	attempts: [frozenAttempt('unison', 11, 3), frozenAttempt('interval', 12, 30)]
};

/** One line for each block and attempt, so that a difference can be read. */
const lines = (items: readonly unknown[]) =>
	items.map((item) => `\t\t${JSON.stringify(item)}`).join(',\n');
process.stdout.write(
	`{\n\t"engineVersion": ${frozen.engineVersion},\n\t"blocks": [\n${lines(frozen.blocks)}\n\t],\n\t"attempts": [\n${lines(frozen.attempts)}\n\t]\n}\n`
);
