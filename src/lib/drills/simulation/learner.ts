import { createRandom, integer, normal, pick, uniform, type Random } from '../../acoustics/random';
import { attemptOf, isoTime } from '../attempt';
import { DEFAULT_OPTIONS, generateBlock } from '../generate';
import type { AttemptSubmission, DeviceFacts, ScoredDrillId, ToleranceSetId } from '../types';
import { tune, type Person } from './controller';

const DAY_MS = 86_400_000;
const MINUTE_MS = 60_000;

/** How someone starts and where practice takes them. All of it invented. */
export interface LearnerProfile {
	/** Slowest beat noticed half of the time: at first and after long practice, b/s. */
	readonly thresholdHz: readonly [first: number, later: number];
	/** Spread of judging a rate: at first and later, as a share. */
	readonly weber: readonly [first: number, later: number];
	/** Chance of searching both edges: at first and later. */
	readonly care: readonly [first: number, later: number];
	readonly handCents: number;
	readonly lapse: number;
	readonly asks: number;
	/** Blocks after which two thirds of the way is made. */
	readonly learningBlocks: number;
	/** Days of practice in a week, about. */
	readonly daysAWeek: number;
	/** Blocks on a day of practice, about. */
	readonly blocksADay: number;
}

export const LEARNER_PROFILES = {
	quick: {
		thresholdHz: [0.7, 0.12],
		weber: [0.25, 0.07],
		care: [0.3, 0.95],
		handCents: 0.08,
		lapse: 0.02,
		asks: 0.2,
		learningBlocks: 9,
		daysAWeek: 5,
		blocksADay: 2
	},
	steady: {
		thresholdHz: [1.1, 0.2],
		weber: [0.3, 0.1],
		care: [0.2, 0.85],
		handCents: 0.12,
		lapse: 0.04,
		asks: 0.3,
		learningBlocks: 18,
		daysAWeek: 4,
		blocksADay: 2
	},
	slow: {
		thresholdHz: [1.6, 0.4],
		weber: [0.4, 0.16],
		care: [0.1, 0.6],
		handCents: 0.2,
		lapse: 0.08,
		asks: 0.35,
		learningBlocks: 30,
		daysAWeek: 3,
		blocksADay: 1.6
	},
	stuck: {
		thresholdHz: [1.2, 0.85],
		weber: [0.35, 0.27],
		care: [0.1, 0.25],
		handCents: 0.25,
		lapse: 0.1,
		asks: 0.1,
		learningBlocks: 25,
		daysAWeek: 4,
		blocksADay: 1.6
	},
	gifted: {
		thresholdHz: [0.3, 0.08],
		weber: [0.12, 0.05],
		care: [0.6, 1],
		handCents: 0.06,
		lapse: 0.01,
		asks: 0.1,
		learningBlocks: 8,
		daysAWeek: 3,
		blocksADay: 1.5
	},
	irregular: {
		thresholdHz: [0.9, 0.22],
		weber: [0.28, 0.11],
		care: [0.25, 0.8],
		handCents: 0.15,
		lapse: 0.06,
		asks: 0.25,
		learningBlocks: 16,
		daysAWeek: 2,
		blocksADay: 3
	}
} as const satisfies Record<string, LearnerProfile>;

export interface LearnerOptions {
	readonly seed: number;
	/** Midnight of the first day, milliseconds since 1970. */
	readonly startMs: number;
	readonly weeks: number;
	readonly profile: LearnerProfile;
	/** Nothing is dated after this moment. */
	readonly untilMs?: number;
	/** By default learning. */
	readonly toleranceSet?: ToleranceSetId;
	/** Block after which interval drills come in (default 4). */
	readonly intervalsAfter?: number;
}

/**
 * A learner's attempts over weeks, oldest first: days of practice and days without, an ear that gets
 * finer with practice and has better and worse days, a hand that really moves the string. The same
 * options give the same attempts. For demonstration data and tests only.
 */
export function* simulateLearner(options: LearnerOptions): Generator<AttemptSubmission> {
	const random = createRandom(options.seed);
	const device = deviceOf(random);
	const hourOfDay = uniform(random, 7, 20);
	const done: Record<ScoredDrillId, number> = { unison: 0, interval: 0 };
	for (let day = 0; day < options.weeks * 7; day += 1) {
		if (random() >= options.profile.daysAWeek / 7) continue;
		const today = Math.exp(0.12 * normal(random));
		let clockMs =
			options.startMs + day * DAY_MS + (hourOfDay + uniform(random, -1, 1)) * 60 * MINUTE_MS;
		for (let block = blocksToday(random, options.profile); block > 0; block -= 1) {
			const drill = chooseDrill(random, done, options.intervalsAfter ?? 4);
			const attempt = simulateAttempt(random, {
				drill,
				startedMs: Math.round(clockMs),
				device,
				toleranceSet: options.toleranceSet ?? 'learning',
				person: personAfter(options.profile, done[drill], today)
			});
			const finishedMs = Date.parse(attempt.finishedAt);
			if (finishedMs > (options.untilMs ?? Number.POSITIVE_INFINITY)) return;
			yield attempt;
			done[drill] += 1;
			clockMs = finishedMs + uniform(random, 1, 15) * MINUTE_MS;
		}
	}
}

export interface SimulatedAttempt {
	readonly drill: ScoredDrillId;
	readonly startedMs: number;
	readonly person: Person;
	readonly device: DeviceFacts;
	readonly toleranceSet: ToleranceSetId;
}

/** One attempt, made by moving the strings of a drawn block. */
export function simulateAttempt(random: Random, attempt: SimulatedAttempt): AttemptSubmission {
	const { drill, device, person } = attempt;
	const id = uuidFrom(random);
	const seed = integer(random, 0, 0xffffffff);
	const options = { ...DEFAULT_OPTIONS[drill], toleranceSet: attempt.toleranceSet };
	const stimulus = generateBlock(drill, seed, options);
	const trials = stimulus.trials.map((spec) => tune(spec, person, random));
	const playedMs = trials.reduce((sum, trial) => sum + trial.committedAtMs, 0);
	// Reading what each trial showed takes time too.
	const readMs = trials.length * integer(random, 4000, 9000);
	return attemptOf({
		id,
		block: stimulus,
		trials,
		device,
		startedAt: isoTime(attempt.startedMs),
		nowMs: attempt.startedMs + playedMs + readMs
	});
}

/** The person after so many blocks of a drill, on a day that is better (< 1) or worse (> 1). */
export function personAfter(profile: LearnerProfile, blocks: number, dayFactor = 1): Person {
	const left = Math.exp(-blocks / profile.learningBlocks);
	const between = ([first, later]: readonly [number, number]) => later + (first - later) * left;
	return {
		hearing: {
			thresholdHz: between(profile.thresholdHz) * dayFactor,
			weber: between(profile.weber) * dayFactor
		},
		handCents: profile.handCents,
		care: between(profile.care),
		lapse: profile.lapse,
		asks: profile.asks * (0.3 + 0.7 * left)
	};
}

function blocksToday(random: Random, profile: LearnerProfile): number {
	const whole = Math.floor(profile.blocksADay);
	return Math.max(
		1,
		whole + (random() < profile.blocksADay - whole ? 1 : 0) + integer(random, -1, 1)
	);
}

function chooseDrill(
	random: Random,
	done: Record<ScoredDrillId, number>,
	intervalsAfter: number
): ScoredDrillId {
	if (done.unison < intervalsAfter) return 'unison';
	return random() < 0.5 ? 'unison' : 'interval';
}

function deviceOf(random: Random): DeviceFacts {
	return {
		sampleRateHz: pick(random, [44_100, 48_000, 48_000]),
		outputLatencySeconds: pick(random, [null, 0.012, 0.024, 0.045]),
		userAgentClass: pick(random, [
			'desktop-chromium',
			'desktop-gecko',
			'desktop-webkit',
			'touch-webkit'
		])
	};
}

/** A version 4 UUID from a seeded source. */
export function uuidFrom(random: Random): string {
	const hex = Array.from({ length: 32 }, () => integer(random, 0, 15).toString(16));
	hex[12] = '4';
	hex[16] = pick(random, ['8', '9', 'a', 'b']);
	const text = hex.join('');
	return [8, 12, 16, 20].reduceRight((id, at) => `${id.slice(0, at)}-${id.slice(at)}`, text);
}
