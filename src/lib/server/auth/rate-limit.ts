import { createHash } from 'node:crypto';
import { RateLimiterPostgres, RateLimiterRes } from 'rate-limiter-flexible';
import type { Sequelize } from 'sequelize';
import { database } from '../database';
import { Refusal } from '../refusal';
import { networkOf } from './network';

interface Limit {
	points: number;
	/** Over which the points are counted, seconds. */
	seconds: number;
}

/** How often something may be tried. Kept in PostgreSQL, so that several servers count together. */
export const LIMITS = {
	/** Failed sign-ins to one account from one address. */
	'sign-in-pair': { points: 10, seconds: 15 * 60 },
	/** Failed sign-ins to one account from anywhere: higher, so that a stranger hardly locks it. */
	'sign-in-account': { points: 50, seconds: 60 * 60 },
	/** Failed sign-ins from one address. */
	'sign-in-address': { points: 100, seconds: 15 * 60 },
	/** Reset mails to one account. */
	'reset-account': { points: 3, seconds: 60 * 60 },
	'reset-address': { points: 30, seconds: 60 * 60 },
	/** Links from mails that were opened or used, good or bad. */
	'token-address': { points: 200, seconds: 15 * 60 },
	/** Invitations that one instructor sends. */
	'invite-actor': { points: 200, seconds: 60 * 60 },
	/** Mails that a class's join link sends to one account. */
	'join-account': { points: 3, seconds: 60 * 60 },
	'join-address': { points: 60, seconds: 60 * 60 },
	/** Wrong current passwords on the account page. */
	'password-change': { points: 10, seconds: 15 * 60 }
} satisfies Record<string, Limit>;

export type LimitName = keyof typeof LIMITS;

const limiters = new Map<LimitName, { on: Sequelize; limiter: RateLimiterPostgres }>();

function limiterOf(name: LimitName): RateLimiterPostgres {
	const on = database();
	const known = limiters.get(name);
	if (known?.on === on) return known.limiter;
	const { points, seconds } = LIMITS[name];
	const limiter = new RateLimiterPostgres({
		storeClient: on,
		storeType: 'sequelize',
		tableName: 'rate_limit',
		tableCreated: true,
		keyPrefix: name,
		points,
		duration: seconds
	});
	limiters.set(name, { on, limiter });
	return limiter;
}

/** Keys are kept as hashes: the table holds no addresses. */
const keyOf = (...parts: string[]) =>
	createHash('sha256')
		.update(parts.map(networkOf).join('\n').toLowerCase())
		.digest('base64url')
		.slice(0, 32);

function wait(milliseconds: number): string {
	const minutes = Math.max(1, Math.ceil(milliseconds / 60_000));
	return minutes === 1 ? 'a minute' : `${minutes} minutes`;
}

/**
 * Counts one try.
 * @throws Refusal `too-many` with the time to wait, once the limit is used up.
 */
export async function countTry(name: LimitName, ...key: string[]): Promise<void> {
	try {
		await limiterOf(name).consume(keyOf(...key));
	} catch (outcome) {
		if (!(outcome instanceof RateLimiterRes)) throw outcome;
		throw new Refusal('too-many', `Too many tries. Try again in ${wait(outcome.msBeforeNext)}.`);
	}
}

/** Takes one counted try back, after it turned out to be a good one. */
export async function takeBackTry(name: LimitName, ...key: string[]): Promise<void> {
	await limiterOf(name).reward(keyOf(...key));
}

/** Forgets all tries, after the right password. */
export async function forgetTries(name: LimitName, ...key: string[]): Promise<void> {
	await limiterOf(name).delete(keyOf(...key));
}
