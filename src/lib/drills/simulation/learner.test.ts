import { describe, expect, it } from 'vitest';
import { createRandom } from '../../acoustics/random';
import { generateBlock } from '../generate';
import { median, scoreBlock } from '../score';
import { checkSubmission } from '../submission';
import type { AttemptSubmission, ScoredDrillId } from '../types';
import { PERFECT_PERSON, tune } from './controller';
import { heardRateHz } from './ear';
import { LEARNER_PROFILES, simulateLearner, uuidFrom, type LearnerProfile } from './learner';

const START = Date.UTC(2026, 0, 5);

function learn(profile: LearnerProfile, seed: number, weeks = 8): AttemptSubmission[] {
	return [...simulateLearner({ seed, startMs: START, weeks, profile })];
}

function medians(attempts: AttemptSubmission[], drill: ScoredDrillId): number[] {
	return attempts
		.filter((a) => a.drill === drill)
		.map((a) => scoreBlock(a.stimulus, a.trials).score);
}

describe('a perfect controller', () => {
	it('leaves every trial inside, by moving the string and hearing only rates', () => {
		for (const drill of ['unison', 'interval'] as const) {
			for (let seed = 0; seed < 20; seed += 1) {
				const block = generateBlock(drill, seed);
				const random = createRandom(seed + 1000);
				const raws = block.trials.map((spec) => tune(spec, PERFECT_PERSON, random));
				expect(scoreBlock(block, raws).inside).toBe(10);
			}
		}
	});
});

describe('a simulated ear', () => {
	it('notices a beat at its threshold half of the time and judges rates with its own spread', () => {
		const random = createRandom(4);
		const hearing = { thresholdHz: 0.5, weber: 0.1 };
		const heard = Array.from({ length: 4000 }, () => heardRateHz(0.5, hearing, random));
		const noticed = heard.filter((rate) => rate > 0);
		// Three standard deviations of a fair draw are 95.
		expect(Math.abs(noticed.length - 2000)).toBeLessThan(95);
		expect(Math.abs(median(noticed) - 0.5)).toBeLessThan(0.01);
		expect(heardRateHz(0, hearing, random)).toBe(0);
	});
});

describe('a simulated learner', () => {
	it('makes attempts that the server would take, with the score it would give', () => {
		for (const profile of Object.values(LEARNER_PROFILES)) {
			const attempts = learn(profile, 11, 2);
			expect(attempts.length).toBeGreaterThan(0);
			for (const attempt of attempts) {
				const check = checkSubmission(JSON.parse(JSON.stringify(attempt)));
				expect(check).toMatchObject({ ok: true, result: { score: attempt.clientScore } });
			}
		}
	});

	it('is the same for the same options and another for another seed', () => {
		const first = learn(LEARNER_PROFILES.steady, 3, 2);
		expect(learn(LEARNER_PROFILES.steady, 3, 2)).toEqual(first);
		expect(learn(LEARNER_PROFILES.steady, 4, 2)[0].id).not.toBe(first[0].id);
	});

	it('gets better over the weeks', () => {
		for (const name of ['quick', 'steady', 'gifted'] as const) {
			const attempts = [1, 2].map((seed) => learn(LEARNER_PROFILES[name], seed));
			for (const drill of ['unison', 'interval'] as const) {
				const own = attempts.map((made) => medians(made, drill));
				const early = own.flatMap((scores) => scores.slice(0, Math.floor(scores.length / 3)));
				const late = own.flatMap((scores) => scores.slice(-Math.floor(scores.length / 3)));
				expect(median(late)).toBeLessThan(median(early));
			}
		}
	});

	it('differs by profile: a gifted one ends finer than a stuck one', () => {
		const end = (profile: LearnerProfile) => median(medians(learn(profile, 5), 'unison').slice(-6));
		expect(end(LEARNER_PROFILES.gifted)).toBeLessThan(0.5 * end(LEARNER_PROFILES.stuck));
	});

	it('practises in order of time, on some days and not on others, never past the end', () => {
		const untilMs = START + 30 * 86_400_000;
		const attempts = [
			...simulateLearner({
				seed: 8,
				startMs: START,
				weeks: 8,
				profile: LEARNER_PROFILES.steady,
				untilMs
			})
		];
		const times = attempts.map((a) => Date.parse(a.startedAt));
		expect([...times].sort((a, b) => a - b)).toEqual(times);
		expect(Date.parse(attempts.at(-1)?.finishedAt ?? '')).toBeLessThanOrEqual(untilMs);
		const days = new Set(times.map((ms) => Math.floor(ms / 86_400_000)));
		expect(days.size).toBeGreaterThan(8);
		expect(days.size).toBeLessThan(28);
		expect(new Set(attempts.map(({ id }) => id)).size).toBe(attempts.length);
	});
});

it('makes version 4 UUIDs', () => {
	const random = createRandom(1);
	for (let i = 0; i < 100; i += 1) {
		expect(uuidFrom(random)).toMatch(
			/^[0-9a-f]{8}-[0-9a-f]{4}-4[0-9a-f]{3}-[89ab][0-9a-f]{3}-[0-9a-f]{12}$/
		);
	}
});
