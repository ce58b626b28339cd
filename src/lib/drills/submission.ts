import { z } from 'zod';
import { DRILL_INTERVALS, DRILL_PIANOS, TOLERANCE_SET_IDS } from './catalogue';
import { generateBlock, isKnownEngineVersion } from './generate';
import { scoreBlock } from './score';
import { MAX_TRACE_EVENTS, traceFault } from './trace';
import {
	BLOCK_TRIALS,
	TRACE_KINDS,
	type AttemptSubmission,
	type BlockSpec,
	type SubmissionCheck
} from './types';

const cents = z.number().min(-100).max(100);
const wholeMs = z.number().int().min(0).max(86_400_000);
const drill = z.enum(['unison', 'interval']);
const seed = z.number().int().min(0).max(0xffffffff);
const toleranceSet = z.enum(TOLERANCE_SET_IDS);
const midi = z.number().int().min(21).max(108);

const options = z.strictObject({
	toleranceSet,
	piano: z.enum([...DRILL_PIANOS, 'varied']),
	intervals: z.array(z.enum(DRILL_INTERVALS)).min(1).max(DRILL_INTERVALS.length).optional()
});

const trialBase = {
	index: z
		.number()
		.int()
		.min(0)
		.max(BLOCK_TRIALS - 1),
	piano: z.enum(DRILL_PIANOS),
	velocityPercent: z.number().int().min(1).max(100),
	startCents: cents,
	toleranceSet
};
const trialSpec = z.discriminatedUnion('drill', [
	z.strictObject({ drill: z.literal('unison'), ...trialBase, midi }),
	z.strictObject({
		drill: z.literal('interval'),
		...trialBase,
		interval: z.enum(DRILL_INTERVALS),
		lowMidi: midi,
		highMidi: midi,
		moving: z.enum(['low', 'high'])
	})
]);

const rawTrial = z.strictObject({
	index: z
		.number()
		.int()
		.min(0)
		.max(BLOCK_TRIALS - 1),
	startCents: cents,
	trace: z.array(z.tuple([wholeMs, z.enum(TRACE_KINDS), cents])).max(MAX_TRACE_EVENTS),
	committedCents: cents,
	committedAtMs: wholeMs
});

/** The shape of an attempt as a browser sends it; anything more or less is refused. */
export const submissionSchema = z.strictObject({
	id: z.uuid(),
	drill,
	engineVersion: z.number().int().min(1).max(1_000_000),
	seed,
	stimulus: z.strictObject({
		drill,
		engineVersion: z.number().int().min(1),
		seed,
		options,
		trials: z.array(trialSpec).length(BLOCK_TRIALS)
	}),
	trials: z.array(rawTrial).length(BLOCK_TRIALS),
	device: z.strictObject({
		sampleRateHz: z.number().min(8000).max(384_000),
		outputLatencySeconds: z.number().min(0).max(10).nullable(),
		userAgentClass: z.string().min(1).max(60)
	}),
	clientScore: z.number().min(0).max(200),
	startedAt: z.iso.datetime(),
	finishedAt: z.iso.datetime()
});

/**
 * Whether an attempt is well formed and possible: its stimulus is what its seed draws, and each trial
 * can have happened on that stimulus. The client's score is not judged here; compare it with
 * `result.score`.
 * @returns the attempt and its score by the rules of its own engine version, or one sentence why not
 */
export function checkSubmission(value: unknown): SubmissionCheck {
	const parsed = submissionSchema.safeParse(value);
	if (!parsed.success) return { ok: false, reason: malformed(parsed.error) };
	const submission: AttemptSubmission = parsed.data;
	const reason = impossible(submission);
	if (reason) return { ok: false, reason };
	return { ok: true, submission, result: scoreBlock(submission.stimulus, submission.trials) };
}

function malformed(error: z.ZodError): string {
	const issue = error.issues[0];
	const path = issue.path.map(String).join('.');
	return path ? `The attempt is malformed at ${path}.` : 'The attempt is malformed.';
}

function impossible(submission: AttemptSubmission): string | null {
	const { stimulus } = submission;
	if (!isKnownEngineVersion(submission.engineVersion)) {
		return `Engine version ${submission.engineVersion} is not known here.`;
	}
	if (
		stimulus.drill !== submission.drill ||
		stimulus.seed !== submission.seed ||
		stimulus.engineVersion !== submission.engineVersion
	) {
		return 'The attempt and its stimulus name different drills, seeds or engine versions.';
	}
	const drawn = generateBlock(
		submission.drill,
		submission.seed,
		stimulus.options,
		submission.engineVersion
	);
	if (!sameBlock(drawn, stimulus)) return 'The stimulus is not what its seed draws.';
	for (const [index, spec] of stimulus.trials.entries()) {
		const fault = traceFault(spec, submission.trials[index]);
		if (fault) return fault;
	}
	return timesFault(submission);
}

/** The clock of the attempt must leave room for its trials. */
function timesFault(submission: AttemptSubmission): string | null {
	const lastedMs = Date.parse(submission.finishedAt) - Date.parse(submission.startedAt);
	if (lastedMs < 0) return 'The attempt finished before it started.';
	const playedMs = submission.trials.reduce((sum, trial) => sum + trial.committedAtMs, 0);
	// Each end is rounded to a millisecond, and so is each trial.
	if (lastedMs + BLOCK_TRIALS + 2 < playedMs) return 'The trials last longer than the attempt.';
	return null;
}

/** Field by field, whatever the order in which the fields arrived. */
function sameBlock(left: BlockSpec, right: BlockSpec): boolean {
	return canonicalJson(left) === canonicalJson(right);
}

function canonicalJson(value: unknown): string {
	return JSON.stringify(value, (_key, inner: unknown) =>
		inner !== null && typeof inner === 'object' && !Array.isArray(inner)
			? Object.fromEntries(Object.entries(inner).sort(([a], [b]) => (a < b ? -1 : 1)))
			: inner
	);
}
