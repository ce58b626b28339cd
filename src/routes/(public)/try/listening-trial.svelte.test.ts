import { describe, expect, it, vi } from 'vitest';
import type { ToneEngine } from '$lib/synthesis/types';
import { generateOddOneTrial } from '$lib/drills/odd-one';
import { ListeningTrial } from './listening-trial.svelte';
import type { TrialParts } from './trial-parts';

/** An engine that makes no sound but tells what it was asked for. */
function silentEngine(): ToneEngine {
	const nothing = vi.fn();
	return {
		sampleRateHz: 48_000,
		outputLatencySeconds: 0,
		baseLatencySeconds: 0,
		strike: nothing,
		strikeFork: nothing,
		retune: nothing,
		mute: nothing,
		damp: nothing,
		stopAll: vi.fn(),
		setLevel: nothing,
		playSamples: vi.fn(),
		playPartial: nothing,
		now: () => 0,
		resume: vi.fn(() => Promise.resolve()),
		close: vi.fn(() => Promise.resolve())
	};
}

function setUp(seed = 7) {
	const engine = silentEngine();
	const struck: number[] = [];
	const parts: TrialParts = {
		createEngine: vi.fn(() => Promise.resolve(engine)),
		trial: generateOddOneTrial,
		strike: (_engine, _trial, tone) => struck.push(tone),
		damp: () => {},
		reveal: (trial) => ({
			answer: trial.answer,
			note: 'A4',
			partial: 1,
			partialHz: 440,
			rateHz: 2,
			spreadCents: trial.spreadCents,
			seconds: 2.8,
			shores: []
		})
	};
	const load = vi.fn(() => Promise.resolve(parts));
	let next = seed;
	const trial = new ListeningTrial(
		load,
		() => next++,
		() => Promise.resolve()
	);
	return { trial, engine, struck, parts, load, spec: generateOddOneTrial(seed) };
}

describe('the listening trial', () => {
	it('loads nothing before somebody wants to listen', async () => {
		const { trial, load } = setUp();
		expect(load).not.toHaveBeenCalled();
		trial.choose(1);
		expect(trial.phase).toBe('idle');
		await trial.listen();
		expect(load).toHaveBeenCalledOnce();
	});

	it('plays three tones in turn and then waits for the answer', async () => {
		const { trial, struck } = setUp();
		await trial.listen();
		expect(struck).toEqual([0, 1, 2]);
		expect(trial.phase).toBe('ready');
		expect(trial.heard).toBe(1);
		expect(trial.sounding).toBeNull();
	});

	it('knows nothing of the answer before it is given', async () => {
		const { trial, spec } = setUp();
		await trial.listen();
		expect(trial.reveal).toBeNull();
		expect(trial.answer).toBeNull();
		trial.choose(spec.answer);
		expect(trial.phase).toBe('answered');
		expect(trial.reveal?.answer).toBe(spec.answer);
		expect([trial.right, trial.asked]).toEqual([1, 1]);
	});

	it('counts a wrong answer as asked and not as right, and takes only one', async () => {
		const { trial, spec } = setUp();
		await trial.listen();
		trial.choose(spec.answer === 0 ? 1 : 0);
		trial.choose(spec.answer);
		expect([trial.right, trial.asked]).toEqual([0, 1]);
	});

	it('draws other tones for another trial and hides the last answer', async () => {
		const { trial, parts, spec } = setUp();
		const drawn = vi.spyOn(parts, 'trial');
		await trial.listen();
		trial.choose(spec.answer);
		await trial.another();
		expect(trial.phase).toBe('ready');
		expect(trial.reveal).toBeNull();
		expect(drawn.mock.calls.flat()).toEqual([7, 8]);
		expect(parts.createEngine).toHaveBeenCalledOnce();
	});

	it('says in a sentence why there is no sound, and begins afresh next time', async () => {
		const { trial, engine } = setUp();
		vi.mocked(engine.resume).mockRejectedValueOnce(new Error('The sound clock stands still.'));
		await trial.listen();
		expect(trial.fault).toBe('The sound clock stands still.');
		expect(trial.phase).toBe('idle');
		expect(engine.close).toHaveBeenCalledOnce();
		await trial.listen();
		expect(trial.fault).toBeNull();
		expect(trial.phase).toBe('ready');
	});

	it('keeps the answer on the page when a tone is heard again', async () => {
		const { trial, struck, spec } = setUp();
		await trial.listen();
		trial.choose(spec.answer);
		await trial.again(2);
		expect(struck).toEqual([0, 1, 2, 2]);
		expect(trial.phase).toBe('answered');
	});
});
