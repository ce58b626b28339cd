import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { generateBlock } from './generate';
import { scoreBlock, scorers } from './score';
import { checkSubmission } from './submission';
import type { AttemptSubmission, BlockResult, BlockSpec, RawTrial } from './types';

/** What an engine version drew and how it scored, written down when it was first used. */
interface Frozen {
	engineVersion: number;
	blocks: { block: BlockSpec; trials: RawTrial[]; result: BlockResult }[];
	attempts: { attempt: AttemptSubmission; result: BlockResult }[];
}

const FOLDER = new URL('../../../fixtures/golden/engine/', import.meta.url);
const versions = readdirSync(FOLDER)
	.filter((name) => name.endsWith('.json'))
	.map((name) => JSON.parse(readFileSync(new URL(name, FOLDER), 'utf8')) as Frozen);

/** Equal in everything but the last digits, which another machine's mathematics may round otherwise. */
function expectSame(now: unknown, then: unknown, where: string): void {
	if (typeof then === 'number' && typeof now === 'number') {
		expect(Math.abs(now - then), where).toBeLessThanOrEqual(1e-9 * Math.max(1, Math.abs(then)));
	} else if (then !== null && typeof then === 'object') {
		expect(Object.keys(now as object).sort(), where).toEqual(Object.keys(then).sort());
		for (const [key, value] of Object.entries(then)) {
			expectSame((now as Record<string, unknown>)[key], value, `${where}.${key}`);
		}
	} else expect(now, where).toBe(then);
}

it('every version that can be scored is written down', () => {
	expect(versions.map(({ engineVersion }) => String(engineVersion)).sort()).toEqual(
		Object.keys(scorers).sort()
	);
});

describe.each(versions)('engine version $engineVersion, as it was first used', (frozen) => {
	it.each(frozen.blocks)('draws $block.drill block $block.seed', ({ block }) => {
		const { drill, seed, options, engineVersion } = block;
		expect(engineVersion).toBe(frozen.engineVersion);
		expect(generateBlock(drill, seed, options, engineVersion)).toEqual(block);
	});

	it.each(frozen.blocks)('scores $block.drill block $block.seed', ({ block, trials, result }) => {
		expectSame(scoreBlock(block, trials), result, 'result');
	});

	it.each(frozen.attempts)('takes a played $attempt.drill attempt', ({ attempt, result }) => {
		const check = checkSubmission(attempt);
		expect(check).toMatchObject({ ok: true });
		if (check.ok) expectSame(check.result, result, 'result');
	});
});
