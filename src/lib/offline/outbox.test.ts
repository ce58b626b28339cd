import 'fake-indexeddb/auto';
import { beforeEach, describe, expect, it } from 'vitest';
import type { AttemptSubmission } from '../drills/types';
import { createBlockStore } from './block-store';
import { openOfflineDatabase, type OfflineDatabase } from './database';
import { backoffMs, createOutbox, type OutboxTools } from './outbox';
import { databaseOutboxStore, memoryOutboxStore } from './outbox-store';

const ANNA = '6b0f8a36-0000-4000-8000-000000000001';
const BEN = '6b0f8a36-0000-4000-8000-000000000002';

let databaseCount = 0;
let clockMs = 0;
let sent: { id: string; student: string | null }[] = [];
let opened: OfflineDatabase[] = [];

/** An attempt as far as the outbox looks at it. */
function attempt(id: string): AttemptSubmission {
	return { id, drill: 'unison' } as unknown as AttemptSubmission;
}

type Answer = Response | Error | (() => Promise<Response>);

function toolsFor(name: string, answers: (id: string) => Answer): OutboxTools {
	let connection: Promise<OfflineDatabase> | null = null;
	return {
		store: databaseOutboxStore(() => {
			connection ??= openOfflineDatabase(name).then((database) => {
				opened.push(database);
				return database;
			});
			return connection;
		}),
		now: () => clockMs,
		random: () => 0.5,
		fetch: (async (_url: string, init: RequestInit) => {
			const { id } = JSON.parse(String(init.body)) as { id: string };
			sent.push({ id, student: new Headers(init.headers).get('x-student-id') });
			const answer = answers(id);
			if (answer instanceof Error) throw answer;
			return typeof answer === 'function' ? answer() : answer;
		}) as typeof globalThis.fetch
	};
}

const stored = (score = 1.5) => Response.json({ score }, { status: 201 });
const freshName = () => `outbox-${(databaseCount += 1)}`;

beforeEach(() => {
	for (const database of opened) database.close();
	opened = [];
	sent = [];
	clockMs = 1_000_000;
});

describe('outbox', () => {
	it('sends in the order made and forgets only what was confirmed', async () => {
		const outbox = createOutbox(toolsFor(freshName(), () => stored(0.7)));
		for (const id of ['c', 'a', 'b']) {
			clockMs += 1;
			await outbox.enqueue(ANNA, attempt(id));
		}
		const report = await outbox.flush(ANNA);
		expect(sent.map(({ id }) => id)).toEqual(['c', 'a', 'b']);
		expect(report).toMatchObject({ waiting: 0, stopped: null, nextTryAtMs: null });
		expect(report.stored[0]).toMatchObject({ id: 'c', serverScore: 0.7 });
		expect(await outbox.list(ANNA)).toEqual([]);
	});

	it('keeps one entry for an attempt queued twice', async () => {
		const outbox = createOutbox(toolsFor(freshName(), () => stored()));
		await outbox.enqueue(ANNA, attempt('a'));
		await outbox.enqueue(ANNA, attempt('a'));
		expect(await outbox.list(ANNA)).toHaveLength(1);
	});

	it('keeps everything while there is no network, and waits before the next try', async () => {
		let online = false;
		const outbox = createOutbox(
			toolsFor(freshName(), () => (online ? stored() : new TypeError('no route')))
		);
		await outbox.enqueue(ANNA, attempt('a'));
		await outbox.enqueue(ANNA, attempt('b'));
		const first = await outbox.flush(ANNA);
		expect(first).toMatchObject({ waiting: 2, stopped: 'no-network' });
		expect(sent).toHaveLength(1);
		expect(first.nextTryAtMs).toBe(clockMs + 4000);

		online = true;
		await outbox.flush(ANNA);
		expect(sent).toHaveLength(1);
		clockMs += 4000;
		expect((await outbox.flush(ANNA)).stored).toHaveLength(2);
	});

	it('sends at once when asked to', async () => {
		let online = false;
		const outbox = createOutbox(
			toolsFor(freshName(), () => (online ? stored() : new TypeError('no route')))
		);
		await outbox.enqueue(ANNA, attempt('a'));
		await outbox.flush(ANNA);
		online = true;
		expect((await outbox.flush(ANNA, { force: true })).stored).toHaveLength(1);
	});

	it('tries again after a fault of the server, waiting longer each time', async () => {
		const outbox = createOutbox(toolsFor(freshName(), () => new Response('', { status: 503 })));
		await outbox.enqueue(ANNA, attempt('a'));
		const waits: number[] = [];
		for (let round = 0; round < 9; round += 1) {
			const report = await outbox.flush(ANNA);
			expect(report).toMatchObject({ waiting: 1, stopped: 'server-busy' });
			const next = report.nextTryAtMs ?? Number.NaN;
			waits.push(next - clockMs);
			clockMs = next;
		}
		expect(waits.slice(0, 4)).toEqual([4000, 8000, 16_000, 32_000]);
		expect(Math.max(...waits)).toBe(300_000);
	});

	it('heeds a server that says when to come back', async () => {
		const busy = () => new Response('', { status: 429, headers: { 'retry-after': '30' } });
		const outbox = createOutbox(toolsFor(freshName(), busy));
		await outbox.enqueue(ANNA, attempt('a'));
		expect((await outbox.flush(ANNA)).nextTryAtMs).toBe(clockMs + 30_000);
	});

	it('keeps what was refused, with the sentence, and goes on with the rest', async () => {
		const refusal = Response.json(
			{ detail: 'Trial 3 was committed without one strike.' },
			{ status: 422 }
		);
		const outbox = createOutbox(toolsFor(freshName(), (id) => (id === 'bad' ? refusal : stored())));
		await outbox.enqueue(ANNA, attempt('bad'));
		clockMs += 1;
		await outbox.enqueue(ANNA, attempt('good'));
		const report = await outbox.flush(ANNA);
		expect(report.stored.map(({ id }) => id)).toEqual(['good']);
		const [kept] = await outbox.list(ANNA);
		expect(kept).toMatchObject({
			id: 'bad',
			state: 'refused',
			refusal: 'Trial 3 was committed without one strike.'
		});
		await outbox.flush(ANNA, { force: true });
		expect(sent.filter(({ id }) => id === 'bad')).toHaveLength(1);
		await outbox.dismissRefused(ANNA, 'bad');
		expect(await outbox.list(ANNA)).toEqual([]);
	});

	it('takes a 404 for an answer only when it is described', async () => {
		const replaced = createOutbox(toolsFor(freshName(), () => new Response('', { status: 404 })));
		await replaced.enqueue(ANNA, attempt('a'));
		expect(await replaced.flush(ANNA)).toMatchObject({ waiting: 1, stopped: 'server-busy' });
		const described = () =>
			new Response(JSON.stringify({ detail: 'This attempt cannot be stored for your account.' }), {
				status: 404,
				headers: { 'content-type': 'application/problem+json' }
			});
		const answered = createOutbox(toolsFor(freshName(), described));
		await answered.enqueue(ANNA, attempt('a'));
		expect((await answered.flush(ANNA)).refused).toHaveLength(1);
	});

	it('never dismisses what still waits', async () => {
		const outbox = createOutbox(toolsFor(freshName(), () => stored()));
		await outbox.enqueue(ANNA, attempt('a'));
		await outbox.dismissRefused(ANNA, 'a');
		expect(await outbox.list(ANNA)).toHaveLength(1);
	});

	it('holds on to the work of someone who was signed out meanwhile', async () => {
		for (const status of [401, 303]) {
			const outbox = createOutbox(toolsFor(freshName(), () => new Response(null, { status })));
			await outbox.enqueue(ANNA, attempt('a'));
			expect(await outbox.flush(ANNA)).toMatchObject({ waiting: 1, stopped: 'signed-out' });
		}
	});

	it('neither shows nor sends another user’s work', async () => {
		const outbox = createOutbox(toolsFor(freshName(), () => stored()));
		await outbox.enqueue(ANNA, attempt('hers'));
		await outbox.enqueue(BEN, attempt('his'));
		expect((await outbox.list(BEN)).map(({ id }) => id)).toEqual(['his']);
		await outbox.flush(BEN);
		expect(sent).toEqual([{ id: 'his', student: BEN }]);
		expect((await outbox.list(ANNA)).map(({ id }) => id)).toEqual(['hers']);
	});

	it('survives closing the tab between the answer and forgetting, and stores once', async () => {
		const name = freshName();
		const server = new Set<string>();
		let calls = 0;
		const answer = (id: string): Answer => {
			calls += 1;
			server.add(id);
			// The first answer is lost on the way back: the browser never learns that it was stored.
			return calls === 1 ? new TypeError('connection lost') : stored();
		};
		const before = createOutbox(toolsFor(name, answer));
		await before.enqueue(ANNA, attempt('a'));
		await before.flush(ANNA);
		for (const database of opened) database.close();

		const after = createOutbox(toolsFor(name, answer));
		expect(await after.list(ANNA)).toHaveLength(1);
		const report = await after.flush(ANNA, { force: true });
		expect(report.stored).toHaveLength(1);
		expect([...server]).toEqual(['a']);
		expect(await after.list(ANNA)).toEqual([]);
	});

	it('runs one round at a time and does not miss what was added meanwhile', async () => {
		let release: (response: Response) => void = () => {};
		const outbox = createOutbox(
			toolsFor(freshName(), (id) =>
				id === 'slow' ? () => new Promise<Response>((resolve) => (release = resolve)) : stored()
			)
		);
		await outbox.enqueue(ANNA, attempt('slow'));
		const first = outbox.flush(ANNA);
		while (sent.length === 0) await new Promise((resolve) => setTimeout(resolve, 1));
		clockMs += 1;
		await outbox.enqueue(ANNA, attempt('late'));
		const second = outbox.flush(ANNA);
		release(stored());
		await Promise.all([first, second]);
		expect(sent.map(({ id }) => id)).toEqual(['slow', 'late']);
		expect(await outbox.list(ANNA)).toEqual([]);
	});

	it('works from memory where the browser keeps nothing', async () => {
		const tools = { ...toolsFor(freshName(), () => stored()), store: memoryOutboxStore() };
		const outbox = createOutbox(tools);
		await outbox.enqueue(ANNA, attempt('hers'));
		await outbox.enqueue(BEN, attempt('his'));
		expect(await outbox.list(ANNA)).toHaveLength(1);
		expect((await outbox.flush(ANNA)).stored).toHaveLength(1);
		expect(await outbox.list(ANNA)).toEqual([]);
		expect(await outbox.list(BEN)).toHaveLength(1);
	});

	it('spreads retries within a quarter to either side', () => {
		expect(backoffMs(1, () => 0)).toBe(3000);
		expect(backoffMs(1, () => 1)).toBe(5000);
		expect(backoffMs(50, () => 0.5)).toBe(300_000);
	});
});

describe('blocks in progress', () => {
	it('come back after a reload, to their own user only', async () => {
		const database = openOfflineDatabase(freshName());
		opened.push(await database);
		const store = createBlockStore(() => database);
		const progress = {
			userId: ANNA,
			drill: 'unison' as const,
			attemptId: 'a',
			block: {} as never,
			trials: [],
			startedAt: '2026-03-10T12:00:00.000Z',
			submission: null
		};
		await store.save(progress);
		expect(await store.load(ANNA, 'unison')).toEqual(progress);
		expect(await store.load(BEN, 'unison')).toBeNull();
		expect(await store.load(ANNA, 'interval')).toBeNull();
		await store.clear(ANNA, 'unison');
		expect(await store.load(ANNA, 'unison')).toBeNull();
	});
});
