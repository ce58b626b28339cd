import { randomUUID } from 'node:crypto';
import {
	generateBlock,
	scoreBlock,
	type AttemptSubmission,
	type RawTrial,
	type ScoredDrillId,
	type TrialSpec
} from '../../src/lib/drills';
import { positionAfter, stepsOfMove } from '../../src/lib/drills/grid';

/** A trial in which the string was struck, moved to about `leftCents`, struck again and committed. */
function played(spec: TrialSpec, leftCents: number): RawTrial {
	const cents = positionAfter(spec.startCents, stepsOfMove(leftCents - spec.startCents));
	return {
		index: spec.index,
		startCents: spec.startCents,
		trace: [
			[400, 'strike', spec.startCents],
			[2400, 'move', cents],
			[3000, 'strike', cents]
		],
		committedCents: cents,
		committedAtMs: 6000
	};
}

export interface Played {
	id?: string;
	drill?: ScoredDrillId;
	seed?: number;
	/** Where each string is left, cents from its target. */
	leftCents?: (index: number) => number;
	finishedAt?: Date;
}

/** A whole lawful attempt as a browser would send it, with the score that the server will find. */
export function playedAttempt({
	id = randomUUID(),
	drill = 'unison',
	seed = 11,
	leftCents = (index) => 0.3 * (index - 4),
	finishedAt = new Date('2026-05-04T10:00:00.000Z')
}: Played = {}): AttemptSubmission {
	const stimulus = generateBlock(drill, seed);
	const trials = stimulus.trials.map((spec) => played(spec, leftCents(spec.index)));
	return {
		id,
		drill,
		engineVersion: stimulus.engineVersion,
		seed,
		stimulus,
		trials,
		device: {
			sampleRateHz: 48_000,
			outputLatencySeconds: 0.02,
			userAgentClass: 'desktop-chromium'
		},
		clientScore: scoreBlock(stimulus, trials).score,
		startedAt: new Date(finishedAt.getTime() - 90_000).toISOString(),
		finishedAt: finishedAt.toISOString()
	};
}
