import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { createRandom, normal } from '../acoustics/random';
import { decodeAudio } from './decode';
import { recordingFacts } from './recording-facts';
import { StrikeDetector } from './strike-detector';
import { LEAD_SECONDS, StrikeRecorder, type StrikeClip } from './strike-recorder';

const RATE = 48_000;
const BLOCK = 1024;

const clipOf = (name: string) =>
	decodeAudio(
		new Uint8Array(
			readFileSync(new URL(`../../../fixtures/recordings/${name}.flac`, import.meta.url))
		)
	);

/** White room noise at `db` re full scale with each tone added at its time. */
function room(seconds: number, db: number, tones: [atSeconds: number, samples: Float32Array][]) {
	const random = createRandom(7);
	const sd = 10 ** (db / 20);
	const out = Float32Array.from({ length: seconds * RATE }, () => sd * normal(random));
	for (const [at, tone] of tones) {
		const from = Math.round(at * RATE);
		for (let i = 0; i < tone.length && from + i < out.length; i++) out[from + i] += tone[i];
	}
	return out;
}

function record(stream: Float32Array, seconds = 4): { clip: StrikeClip | null; states: string[] } {
	const recorder = new StrikeRecorder(RATE, seconds);
	const states: string[] = [recorder.state];
	for (let at = 0; at < stream.length; at += BLOCK) {
		const state = recorder.add(stream.subarray(at, at + BLOCK));
		if (state !== states.at(-1)) states.push(state);
	}
	return { clip: recorder.clip(), states };
}

describe('StrikeRecorder', () => {
	it.each(['grand-one-a3-v10-l', 'grand-one-c4-v4-l', 'grand-one-c5-v10-l', 'grand-two-c3-mf-l'])(
		'keeps four seconds of %s from its strike on',
		async (name) => {
			const { samples } = await clipOf(name);
			const { clip, states } = record(room(8, -70, [[1.3, samples]]));
			expect(states).toEqual(['quiet-first', 'waiting', 'ringing', 'done']);
			if (!clip) throw new Error('nothing recorded');
			expect(clip.samples.length).toBe((4 + LEAD_SECONDS) * RATE);
			expect(clip.restarts).toBe(0);
			// The stream's first 0.1 s is skipped; the clip must hold the strike where it says.
			const onset = clip.samples.findIndex((x) => Math.abs(x) > 0.02) / RATE;
			expect(Math.abs(onset - clip.strikeSample / RATE)).toBeLessThan(0.05);
		}
	);

	it.each(['grand-one-a3-v10-l', 'grand-one-c3-v10-l', 'grand-two-a3-mf-l'])(
		'keeps the last of several strikes of %s, though the earlier ones still ring',
		async (name) => {
			const { samples } = await clipOf(name);
			const stream = room(10, -70, [
				[1, samples],
				[2.5, samples],
				[4.1, samples]
			]);
			const { clip } = record(stream.map((x) => x / 2));
			expect(clip?.restarts).toBe(2);
			expect(clip?.samples.length).toBe((4 + LEAD_SECONDS) * RATE);
		}
	);

	it.each([0.5, 2, 3.7])('gives a strike up for a hole of 10 ms at %f s', async (at) => {
		const { samples } = await clipOf('grand-two-c3-mf-shift080-l');
		const stream = room(14, -75, [
			[1, samples],
			[8.5, samples]
		]);
		const from = Math.round((1 + at) * RATE);
		stream.fill(0, from, from + RATE / 100);
		const recorder = new StrikeRecorder(RATE, 4);
		const states: string[] = [];
		for (let i = 0; i < stream.length; i += BLOCK) {
			const state = recorder.add(stream.subarray(i, i + BLOCK));
			if (state !== states.at(-1)) states.push(state);
		}
		expect(recorder.holes).toBe(1);
		expect(states).toEqual(['quiet-first', 'waiting', 'ringing', 'waiting', 'ringing', 'done']);
		const clip = recorder.clip();
		expect(clip?.restarts).toBe(0);
		expect(
			clip && recordingFacts(clip.samples, RATE, clip.strikeSample).aboveRoomDb
		).toBeGreaterThan(20);
	});

	it('hears nothing in a silent or an evenly noisy room', () => {
		for (const db of [-110, -60, -30]) {
			const { clip, states } = record(room(10, db, []));
			expect(clip).toBeNull();
			expect(states).toEqual(['quiet-first', 'waiting']);
		}
	});

	it('does not take the swell of a beating tone for a strike', () => {
		for (const beatHz of [0.3, 0.7, 1.5, 4, 9]) {
			const tone = Float32Array.from({ length: 8 * RATE }, (_, i) => {
				const t = i / RATE;
				return (
					0.2 *
					Math.exp(-0.3 * t) *
					(Math.sin(2764.6 * t) + Math.sin((2764.6 + 6.2832 * beatHz) * t))
				);
			});
			const strikes: number[] = [];
			new StrikeDetector(RATE).add(room(9, -75, [[1, tone]]), (i) => strikes.push(i / RATE));
			expect(strikes.length).toBe(1);
			expect(strikes[0]).toBeCloseTo(1, 1);
		}
	});
});

describe('recordingFacts', () => {
	it('says how far above the room a strike stands', async () => {
		const { samples } = await clipOf('grand-one-a3-v10-l');
		const facts = recordingFacts(room(7, -60, [[1, samples]]), RATE, RATE);
		expect(facts.clipped).toBe(false);
		expect(facts.quiet).toBe(false);
		expect(facts.aboveRoomDb).toBeGreaterThan(30);
		expect(facts.aboveRoomDb).toBeLessThan(60);
		expect(facts.secondsAfterStrike).toBeCloseTo(6, 6);
		const soft = samples.map((x) => 0.02 * x);
		expect(recordingFacts(room(7, -50, [[1, soft]]), RATE, RATE).quiet).toBe(true);
		expect(recordingFacts(samples, RATE, 0).aboveRoomDb).toBeNull();
	});

	it('flags clipping and nothing else', async () => {
		for (const name of ['grand-one-a3-v10-l', 'grand-one-c5-v10-l', 'grand-two-c3-ff-r']) {
			const { samples } = await clipOf(name);
			expect(recordingFacts(samples, RATE, 0).clipped).toBe(false);
			const loud = samples.map((x) => Math.max(-1, Math.min(1, 2.5 * x)));
			expect(recordingFacts(loud, RATE, 0).clipped).toBe(true);
		}
	});
});
