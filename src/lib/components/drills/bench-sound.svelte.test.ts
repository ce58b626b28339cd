import { describe, expect, it } from 'vitest';
import { intervalCheck } from '../../drills/checks';
import { generateBlock } from '../../drills/generate';
import type { IntervalTrialSpec, UnisonTrialSpec } from '../../drills/types';
import type { ToneEngine, VoiceSpec } from '../../synthesis/types';
import { BenchSound, LEVELS } from './bench-sound.svelte';
import { judgedPartialHz } from './voices';

const unison = generateBlock('unison', 1).trials[0] as UnisonTrialSpec;
const interval = generateBlock('interval', 1).trials[0] as IntervalTrialSpec;

/** An engine that writes down what it is asked. */
function recording() {
	const struck: VoiceSpec[] = [];
	const calls: string[] = [];
	const partials: number[] = [];
	const engine = {
		sampleRateHz: 48_000,
		outputLatencySeconds: 0.02,
		strike: (voice: VoiceSpec) => void struck.push(voice),
		retune: (id: string, index: number, hz: number) =>
			void calls.push(`retune ${id} ${index} ${hz.toFixed(3)}`),
		damp: (id: string) => void calls.push(`damp ${id}`),
		stopAll: () => void calls.push('stop'),
		setLevel: (level: number) => void calls.push(`level ${level}`),
		playPartial: (hz: number) => void partials.push(hz),
		resume: async () => undefined,
		close: async () => undefined
	} as unknown as ToneEngine;
	const sound = new BenchSound({ load: async () => engine, wait: async () => undefined });
	return { sound, struck, calls, partials };
}

describe('the sound of the bench', () => {
	it('starts at a moderate level', async () => {
		const { sound, calls } = recording();
		expect(await sound.start()).toBe(true);
		expect(calls).toContain(`level ${LEVELS.moderate}`);
		expect(sound.facts).toEqual({ sampleRateHz: 48_000, outputLatencySeconds: 0.02 });
	});

	it('strikes two strings of one note, or one of them with the other muted', async () => {
		const { sound, struck } = recording();
		await sound.start();
		sound.strike(unison, 12, 'both');
		sound.strike(unison, 12, 'fixed');
		sound.strike(unison, 12, 'moving');
		expect(struck.map(({ muted }) => muted)).toEqual([
			[false, false],
			[false, true],
			[true, false]
		]);
		const [fixedHz, movingHz] = struck[0].stringsF1Hz;
		expect(1200 * Math.log2(movingHz / fixedHz)).toBeCloseTo(12, 9);
	});

	it('strikes both notes of an interval, or one while the other is damped', async () => {
		const { sound, struck, calls } = recording();
		await sound.start();
		sound.strike(interval, 0, 'both');
		expect(struck.map(({ midi }) => midi)).toEqual([interval.lowMidi, interval.highMidi]);
		calls.length = 0;
		sound.strike(interval, 0, 'moving');
		const moving = interval.moving;
		const other = moving === 'low' ? 'high' : 'low';
		expect(struck.at(-1)?.id).toBe(moving);
		expect(calls).toContain(`damp ${other}`);
		expect(calls).not.toContain(`damp ${moving}`);
	});

	it('lets the sounding string follow the lever, and only that one', async () => {
		const { sound, calls } = recording();
		await sound.start();
		calls.length = 0;
		sound.follow(unison, 3);
		sound.follow(interval, 3);
		expect(calls[0]).toMatch(/^retune unison 1 /);
		expect(calls[1]).toMatch(new RegExp(`^retune ${interval.moving} 0 `));
	});

	it('plays the partial’s pitch, which does not move with the lever, and the target’s beat there', async () => {
		const { sound, partials } = recording();
		await sound.start();
		sound.help(interval);
		sound.target(interval);
		const hz = judgedPartialHz(interval);
		expect(partials.slice(0, 2)).toEqual([hz, hz]);
		expect(partials[2]).toBeGreaterThan(hz);
	});

	it('plays the two halves of a check in turn', async () => {
		const { sound, struck } = recording();
		await sound.start();
		await sound.check(interval, 5);
		const { first, second } = intervalCheck(interval);
		expect(struck.map(({ midi }) => midi)).toEqual([
			first.lowMidi,
			first.highMidi,
			second.lowMidi,
			second.highMidi
		]);
	});

	it('stops a check when something else is struck', async () => {
		const { sound, struck } = recording();
		await sound.start();
		const check = sound.check(interval, 5);
		sound.strike(interval, 5, 'both');
		await check;
		expect(struck.filter(({ id }) => id.startsWith('check'))).toHaveLength(2);
	});

	it('says in a sentence why there is no sound, and can be tried again', async () => {
		let works = false;
		const { sound: good } = recording();
		const sound = new BenchSound({
			load: async () => {
				if (!works)
					throw new Error('Sound needs a secure page: open Ebbtone over HTTPS or on localhost.');
				return {
					resume: async () => undefined,
					setLevel: () => undefined,
					sampleRateHz: 44_100
				} as unknown as ToneEngine;
			},
			wait: async () => undefined
		});
		expect(await sound.start()).toBe(false);
		expect(sound.fault).toContain('secure page');
		works = true;
		expect(await sound.start()).toBe(true);
		expect(sound.fault).toBeNull();
		good.close();
	});
});
