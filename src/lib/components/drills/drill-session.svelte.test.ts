import { describe, expect, it } from 'vitest';
import { checkSubmission } from '../../drills/submission';
import type { AttemptSubmission, DeviceFacts } from '../../drills/types';
import type { BlockStore } from '../../offline/block-store';
import type { BlockInProgress } from '../../offline/database';
import { DrillSession } from './drill-session.svelte';

const DEVICE: DeviceFacts = {
	sampleRateHz: 48_000,
	outputLatencySeconds: null,
	userAgentClass: 'desktop-gecko'
};

/** A browser as far as a session knows it: what is kept survives a new session. */
function browser() {
	const kept = new Map<string, string>();
	const handed: AttemptSubmission[] = [];
	let clockMs = Date.UTC(2026, 2, 10, 12);
	let ids = 0;
	const store: BlockStore = {
		// Through text, as a database would: nothing live may be kept.
		save: async (progress) => void kept.set(progress.drill, JSON.stringify(progress)),
		load: async (_user, drill) => JSON.parse(kept.get(drill) ?? 'null') as BlockInProgress | null,
		clear: async (_user, drill) => void kept.delete(drill)
	};
	return {
		kept,
		handed,
		pass: (ms: number) => (clockMs += ms),
		session: () =>
			new DrillSession('interval', {
				userId: 'anna',
				store,
				handIn: async (submission) => {
					handed.push(structuredClone(submission));
				},
				device: () => DEVICE,
				now: () => (clockMs += 7),
				wait: async () => undefined,
				newId: () => `6b0f8a36-0000-4000-8000-00000000000${(ids += 1)}`,
				newSeed: () => 4711
			})
	};
}

async function play(session: DrillSession, steps: number): Promise<void> {
	session.note('strike');
	session.move(steps);
	session.note('check');
	await session.commit();
	session.next();
}

describe('a block', () => {
	it('runs through ten trials to an attempt that the server would take', async () => {
		const { session: open, handed, kept } = browser();
		const session = open();
		session.begin();
		for (let trial = 0; trial < 10; trial += 1) {
			expect(session.phase).toBe('trial');
			expect(session.index).toBe(trial);
			await play(session, trial - 5);
		}
		expect(session.phase).toBe('summary');
		expect(handed).toHaveLength(1);
		expect(checkSubmission(JSON.parse(JSON.stringify(handed[0])))).toMatchObject({
			ok: true,
			result: { count: 10, checks: 10, score: session.result?.score }
		});
		expect(kept.size).toBe(0);
	});

	it('takes no answer before the strings were struck together', async () => {
		const session = browser().session();
		session.begin();
		session.note('help');
		await session.commit();
		expect(session.phase).toBe('trial');
		session.note('strike');
		await session.commit();
		expect(session.phase).toBe('reveal');
		expect(session.lastResult?.helps).toBe(1);
	});

	it('goes on after a reload with the trials already made', async () => {
		const tab = browser();
		const before = tab.session();
		before.begin();
		for (let trial = 0; trial < 4; trial += 1) await play(before, 3);
		const first = before.raws;

		tab.pass(3_600_000);
		const after = tab.session();
		await after.restore();
		expect(after.unfinished?.trials).toEqual(first);
		after.goOn();
		expect(after.index).toBe(4);
		for (let trial = 4; trial < 10; trial += 1) await play(after, 3);
		expect(tab.handed).toHaveLength(1);
		expect(tab.handed[0].trials.slice(0, 4)).toEqual(first);
		expect(checkSubmission(JSON.parse(JSON.stringify(tab.handed[0]))).ok).toBe(true);
	});

	it('hands in the very same attempt when the tab was closed before it could', async () => {
		const tab = browser();
		const before = tab.session();
		before.begin();
		for (let trial = 0; trial < 9; trial += 1) await play(before, 1);
		before.note('strike');
		await before.commit();
		const [made] = tab.handed;
		// Closed after handing in, before the block was forgotten: what is kept is put back.
		const again = browser();
		again.kept.set(
			'interval',
			JSON.stringify({
				userId: 'anna',
				drill: 'interval',
				attemptId: made.id,
				block: made.stimulus,
				trials: made.trials,
				startedAt: made.startedAt,
				submission: made
			})
		);
		const after = again.session();
		again.pass(86_400_000);
		await after.restore();
		expect(after.phase).toBe('summary');
		expect(again.handed).toEqual([made]);
		expect(again.kept.size).toBe(0);
	});

	it('asks nothing of a block made by rules that are not known here', async () => {
		const tab = browser();
		const session = tab.session();
		session.begin();
		await play(session, 1);
		const progress = JSON.parse(tab.kept.get('interval') ?? '') as BlockInProgress;
		tab.kept.set(
			'interval',
			JSON.stringify({ ...progress, block: { ...progress.block, engineVersion: 999 } })
		);
		const later = tab.session();
		await later.restore();
		expect(later.unfinished).toBeNull();
		expect(later.phase).toBe('intro');
	});

	it('moves nothing between trials', async () => {
		const session = browser().session();
		session.begin();
		session.note('strike');
		await session.commit();
		const left = session.lastRaw?.committedCents;
		expect(session.move(20)).toBe(false);
		session.note('strike');
		expect(session.lastRaw?.committedCents).toBe(left);
	});
});
