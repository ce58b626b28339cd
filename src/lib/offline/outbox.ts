import type { AttemptSubmission } from '../drills/types';
import type { OutboxEntry } from './database';
import type { OutboxStore } from './outbox-store';

/** What the server says about an attempt that it stored. */
export interface StoredAttempt {
	readonly id: string;
	/** The score by the server's own reckoning; null when the answer carried none. */
	readonly serverScore: number | null;
	/** The whole answer, for whoever needs more. */
	readonly answer: unknown;
}

export interface FlushReport {
	readonly stored: readonly StoredAttempt[];
	readonly refused: readonly OutboxEntry[];
	/** Still to be sent. */
	readonly waiting: number;
	/** Why sending stopped: no answer from the server, or nobody is signed in any more. */
	readonly stopped: 'no-network' | 'server-busy' | 'signed-out' | null;
	/** When to try again; null when nothing waits. */
	readonly nextTryAtMs: number | null;
}

export interface OutboxTools {
	readonly store: OutboxStore;
	readonly fetch: typeof globalThis.fetch;
	/** Milliseconds since 1970. */
	readonly now: () => number;
	/** Uniform in [0, 1): spreads retries so that a class does not knock all at once. */
	readonly random: () => number;
}

export interface Outbox {
	enqueue(userId: string, submission: AttemptSubmission): Promise<void>;
	/** Sends what waits, oldest first; with `force` also what is not due yet. */
	flush(userId: string, options?: { force?: boolean }): Promise<FlushReport>;
	list(userId: string): Promise<OutboxEntry[]>;
	/** Takes away an attempt that the server refused, once the student has read why. */
	dismissRefused(userId: string, id: string): Promise<void>;
}

export const ATTEMPTS_URL = '/api/attempts';
const FIRST_WAIT_MS = 4_000;
const LONGEST_WAIT_MS = 5 * 60_000;

/** Wait before the next try: doubling from 4 s up to 5 min, each spread over ±25 %. */
export function backoffMs(tries: number, random: () => number): number {
	const base = Math.min(LONGEST_WAIT_MS, FIRST_WAIT_MS * 2 ** Math.max(0, tries - 1));
	return Math.round(base * (0.75 + 0.5 * random()));
}

/**
 * Attempts on their way to the server. An entry leaves only when the server confirmed it (2xx) or
 * when its student dismissed a refusal; sending twice is harmless because the attempt's id is its
 * own. Entries are kept by user and only ever listed or sent for the user that asks.
 */
export function createOutbox(tools: OutboxTools): Outbox {
	const running = new Map<string, Promise<FlushReport>>();

	async function list(userId: string): Promise<OutboxEntry[]> {
		const entries = await tools.store.list(userId);
		return entries.sort((a, b) => a.queuedAtMs - b.queuedAtMs || (a.id < b.id ? -1 : 1));
	}

	async function enqueue(userId: string, submission: AttemptSubmission): Promise<void> {
		if (await tools.store.get(userId, submission.id)) return;
		await tools.store.put({
			userId,
			id: submission.id,
			submission,
			queuedAtMs: tools.now(),
			state: 'waiting',
			refusal: null,
			tries: 0,
			notBeforeMs: 0
		});
	}

	async function flush(userId: string, options: { force?: boolean } = {}): Promise<FlushReport> {
		// One round at a time for a user; whoever asks meanwhile gets a round of their own after it, so
		// that an attempt added just now is not missed.
		const previous = running.get(userId) ?? Promise.resolve();
		const round = previous.then(
			() => sendAll(userId, options.force ?? false),
			() => sendAll(userId, options.force ?? false)
		);
		running.set(userId, round);
		return round;
	}

	async function sendAll(userId: string, force: boolean): Promise<FlushReport> {
		const stored: StoredAttempt[] = [];
		const refused: OutboxEntry[] = [];
		let stopped: FlushReport['stopped'] = null;
		for (const entry of await list(userId)) {
			if (entry.state === 'refused') continue;
			if (!force && entry.notBeforeMs > tools.now()) continue;
			const outcome = await send(tools, entry);
			if (outcome.kind === 'stored') {
				await tools.store.remove(userId, entry.id);
				stored.push(outcome.attempt);
			} else if (outcome.kind === 'refused') {
				const kept: OutboxEntry = { ...entry, state: 'refused', refusal: outcome.sentence };
				await tools.store.put(kept);
				refused.push(kept);
			} else {
				stopped = outcome.reason;
				await postpone(entry, outcome.waitMs);
				break;
			}
		}
		const waiting = (await list(userId)).filter((entry) => entry.state === 'waiting');
		const nextTryAtMs =
			waiting.length > 0 ? Math.min(...waiting.map((entry) => entry.notBeforeMs)) : null;
		return { stored, refused, waiting: waiting.length, stopped, nextTryAtMs };
	}

	/** All that waits is put off together: the server or the network is away, not this one attempt. */
	async function postpone(failed: OutboxEntry, waitMs: number | null): Promise<void> {
		const tries = failed.tries + 1;
		const notBeforeMs = tools.now() + (waitMs ?? backoffMs(tries, tools.random));
		for (const entry of await list(failed.userId)) {
			if (entry.state === 'waiting') await tools.store.put({ ...entry, tries, notBeforeMs });
		}
	}

	async function dismissRefused(userId: string, id: string): Promise<void> {
		const entry = await tools.store.get(userId, id);
		if (entry?.state === 'refused') await tools.store.remove(userId, id);
	}

	return { enqueue, flush, list, dismissRefused };
}

type SendOutcome =
	| { kind: 'stored'; attempt: StoredAttempt }
	| { kind: 'refused'; sentence: string }
	| { kind: 'later'; reason: NonNullable<FlushReport['stopped']>; waitMs: number | null };

async function send(tools: OutboxTools, entry: OutboxEntry): Promise<SendOutcome> {
	let response: Response;
	try {
		response = await tools.fetch(ATTEMPTS_URL, {
			method: 'POST',
			// The server compares this with who is signed in, so that a change of user in another tab
			// never files one student's work under another's name.
			headers: { 'content-type': 'application/json', 'x-student-id': entry.userId },
			body: JSON.stringify(entry.submission),
			redirect: 'manual'
		});
	} catch {
		return { kind: 'later', reason: 'no-network', waitMs: null };
	}
	if (response.ok) return { kind: 'stored', attempt: await storedAttempt(entry.id, response) };
	return afterRefusal(response);
}

async function afterRefusal(response: Response): Promise<SendOutcome> {
	const { status } = response;
	// A redirect that was not followed leads to the sign-in page.
	if (status === 401 || status === 0 || (status >= 300 && status < 400)) {
		return { kind: 'later', reason: 'signed-out', waitMs: null };
	}
	// A 404 without a problem description is a server that is being replaced, not an answer.
	const nobody = status === 404 && !isProblem(response);
	// Not this attempt's fault: the server is away, busy, or being replaced.
	if (nobody || status >= 500 || [405, 408, 425, 429].includes(status)) {
		return { kind: 'later', reason: 'server-busy', waitMs: retryAfterMs(response) };
	}
	return { kind: 'refused', sentence: await refusalSentence(response) };
}

function isProblem(response: Response): boolean {
	return response.headers.get('content-type')?.startsWith('application/problem+json') ?? false;
}

async function storedAttempt(id: string, response: Response): Promise<StoredAttempt> {
	const answer: unknown = await response.json().catch(() => null);
	const score = (answer as { score?: unknown } | null)?.score;
	return { id, serverScore: typeof score === 'number' ? score : null, answer };
}

async function refusalSentence(response: Response): Promise<string> {
	const body: unknown = await response.json().catch(() => null);
	const { detail, title } = (body ?? {}) as { detail?: unknown; title?: unknown };
	if (typeof detail === 'string' && detail) return detail;
	if (typeof title === 'string' && title) return title;
	return `The server did not take this attempt (answer ${response.status}).`;
}

function retryAfterMs(response: Response): number | null {
	const seconds = Number(response.headers.get('retry-after'));
	return Number.isFinite(seconds) && seconds > 0 ? Math.min(seconds * 1000, LONGEST_WAIT_MS) : null;
}
