import { scoreBlock } from './score';
import type { AttemptSubmission, BlockSpec, DeviceFacts, RawTrial } from './types';

/** A moment as it stands in an attempt: ISO 8601, UTC. */
export function isoTime(timeMs: number): string {
	return new Date(timeMs).toISOString();
}

/**
 * A finished block as it is handed in.
 * @param startedAt ISO 8601
 * @param nowMs milliseconds since 1970; taken later where a clock that was set back would otherwise
 *   leave no room for the trials
 */
export function attemptOf(finished: {
	id: string;
	block: BlockSpec;
	trials: readonly RawTrial[];
	device: DeviceFacts;
	startedAt: string;
	nowMs: number;
}): AttemptSubmission {
	const { id, block, trials, device, startedAt, nowMs } = finished;
	const playedMs = trials.reduce((sum, { committedAtMs }) => sum + committedAtMs, 0);
	return {
		id,
		drill: block.drill,
		engineVersion: block.engineVersion,
		seed: block.seed,
		stimulus: block,
		trials,
		device,
		clientScore: scoreBlock(block, trials).score,
		startedAt,
		finishedAt: isoTime(Math.max(nowMs, Date.parse(startedAt) + playedMs))
	};
}
