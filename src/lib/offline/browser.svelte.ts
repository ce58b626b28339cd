import { SvelteMap } from 'svelte/reactivity';
import type { AttemptSubmission } from '../drills/types';
import { createBlockStore, type BlockStore } from './block-store';
import { openOfflineDatabase, type OfflineDatabase, type OutboxEntry } from './database';
import { createOutbox, type FlushReport, type Outbox, type StoredAttempt } from './outbox';
import { databaseOutboxStore, memoryOutboxStore, type OutboxStore } from './outbox-store';

/**
 * The browser's outbox and what it has to say for itself. Pages read `outboxStatus`; nothing here
 * runs on the server.
 */
class OutboxStatus {
	/** Whose work is shown; another user's is never read. */
	userId = $state<string | null>(null);
	/** Not sent yet, oldest first. */
	waiting = $state.raw<readonly OutboxEntry[]>([]);
	/** Sent and refused, each with the server's sentence. */
	refused = $state.raw<readonly OutboxEntry[]>([]);
	sending = $state(false);
	stopped = $state<FlushReport['stopped']>(null);
	/** False where this browser forgets everything when the page is closed. */
	lasting = $state(true);
	/** What the server answered in this visit, by attempt id. */
	readonly stored = new SvelteMap<string, StoredAttempt>();

	/** One sentence about what is kept here, or null when nothing is. */
	get sentence(): string | null {
		const count = this.waiting.length;
		if (count === 0) return null;
		const what = count === 1 ? 'One attempt is' : `${count} attempts are`;
		if (!this.lasting) return `${what} kept in this page only: leave it open until they are sent.`;
		if (this.stopped === 'signed-out') return `${what} kept here; sign in again to send them.`;
		return `${what} kept here and will be sent.`;
	}
}

export const outboxStatus = new OutboxStatus();

let connection: Promise<OfflineDatabase> | null = null;
let outbox: Promise<Outbox> | null = null;
let retryTimer: ReturnType<typeof setTimeout> | null = null;

function database(): Promise<OfflineDatabase> {
	connection ??= openOfflineDatabase();
	return connection;
}

function outboxOver(store: OutboxStore): Outbox {
	return createOutbox({
		store,
		fetch: (...request) => fetch(...request),
		now: () => Date.now(),
		random: () => Math.random()
	});
}

/** From here on attempts are kept only as long as this page is open; the pages say so. */
function keepInMemory(): Promise<Outbox> {
	outboxStatus.lasting = false;
	outbox = Promise.resolve(outboxOver(memoryOutboxStore()));
	return outbox;
}

/** The kept outbox, or one in memory where the browser has no lasting store. */
function openOutbox(): Promise<Outbox> {
	outbox ??= database().then(() => outboxOver(databaseOutboxStore(database)), keepInMemory);
	return outbox;
}

/** Blocks in progress; saving is best effort where the browser keeps nothing. */
export const blockStore: BlockStore = {
	save: (progress) => quietly(createBlockStore(database).save(progress), undefined),
	load: (userId, drill) => quietly(createBlockStore(database).load(userId, drill), null),
	clear: (userId, drill) => quietly(createBlockStore(database).clear(userId, drill), undefined)
};

/** Keeps an attempt; it is the server's only after a flush. */
export async function enqueueAttempt(userId: string, submission: AttemptSubmission): Promise<void> {
	try {
		await (await openOutbox()).enqueue(userId, submission);
	} catch {
		// A full disk, or storage taken away meanwhile.
		await (await keepInMemory()).enqueue(userId, submission);
	}
	await refreshOutbox(userId);
}

/** Sends what waits for this user and sets the next try; `force` does not wait for its time. */
export async function flushOutbox(
	userId: string,
	options: { force?: boolean } = {}
): Promise<FlushReport> {
	outboxStatus.sending = true;
	try {
		const report = await (await openOutbox()).flush(userId, options);
		outboxStatus.stopped = report.stopped;
		for (const attempt of report.stored) outboxStatus.stored.set(attempt.id, attempt);
		scheduleRetry(userId, report);
		return report;
	} finally {
		outboxStatus.sending = false;
		await refreshOutbox(userId);
	}
}

/** Reads again what is kept for this user. */
export async function refreshOutbox(userId: string): Promise<void> {
	const entries = await (await openOutbox()).list(userId);
	outboxStatus.userId = userId;
	outboxStatus.waiting = entries.filter((entry) => entry.state === 'waiting');
	outboxStatus.refused = entries.filter((entry) => entry.state === 'refused');
}

/** Takes a refused attempt off the list. */
export async function dismissRefused(userId: string, id: string): Promise<void> {
	await (await openOutbox()).dismissRefused(userId, id);
	await refreshOutbox(userId);
}

/**
 * Sends what waits now, whenever the network comes back and whenever the page is looked at again.
 * Call it in the browser once somebody is signed in.
 * @returns stops watching
 */
export function watchOutbox(userId: string): () => void {
	const send = () => void flushOutbox(userId, { force: true });
	const look = () => {
		if (document.visibilityState === 'visible') void flushOutbox(userId);
	};
	window.addEventListener('online', send);
	document.addEventListener('visibilitychange', look);
	void flushOutbox(userId);
	return () => {
		window.removeEventListener('online', send);
		document.removeEventListener('visibilitychange', look);
		if (retryTimer) clearTimeout(retryTimer);
		retryTimer = null;
	};
}

function scheduleRetry(userId: string, report: FlushReport): void {
	if (retryTimer) clearTimeout(retryTimer);
	retryTimer = null;
	if (report.nextTryAtMs === null || report.stopped === 'signed-out') return;
	const waitMs = Math.max(1000, report.nextTryAtMs - Date.now());
	retryTimer = setTimeout(() => void flushOutbox(userId), waitMs);
}

async function quietly<T>(work: Promise<T>, otherwise: T): Promise<T> {
	try {
		return await work;
	} catch {
		return otherwise;
	}
}
