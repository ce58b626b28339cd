import { beforeEach, describe, expect, it, vi } from 'vitest';
import { planFork, planVoice } from '../dsp/voice-plan';
import { voice } from '../testing/render-voices';
import { STRINGS_PROCESSOR, type StringsMessage } from './messages';

const RATE = 48_000;
const QUANTUM = 128;

interface Processor {
	port: { onmessage: ((event: { data: StringsMessage }) => void) | null };
	process(inputs: Float32Array[][], outputs: Float32Array[][]): boolean;
}

const registered = new Map<string, new () => Processor>();

/** A global scope like the audio thread's, as far as the processor uses it. */
function fakeScope(): void {
	vi.stubGlobal('sampleRate', RATE);
	vi.stubGlobal(
		'AudioWorkletProcessor',
		class {
			port = { onmessage: null };
		}
	);
	vi.stubGlobal('registerProcessor', (name: string, made: new () => Processor) =>
		registered.set(name, made)
	);
}

async function start(channels = 1) {
	const Made = registered.get(STRINGS_PROCESSOR);
	if (!Made) throw new Error('the processor did not register itself');
	const processor = new Made();
	const outputs = [Array.from({ length: channels }, () => new Float32Array(QUANTUM))];
	return {
		outputs,
		processor,
		/** Sends a message as the port would: a structured clone of it. */
		send: (message: StringsMessage) =>
			processor.port.onmessage?.({ data: structuredClone(message) }),
		run: () => processor.process([], outputs)
	};
}

beforeEach(async () => {
	fakeScope();
	await import('./strings.worklet');
});

const loud = (samples: Float32Array) => samples.some((x) => Math.abs(x) > 1e-4);
const strike = (slot: number, midi: number, f1Hz: number): StringsMessage => ({
	type: 'strike',
	slot,
	plan: planVoice(voice(midi, [f1Hz, f1Hz + 0.5, f1Hz - 0.4]), RATE)
});

describe('strings processor', () => {
	it('is silent until struck, then sounds in the very next render quantum', async () => {
		const { send, run, outputs } = await start();
		expect(run()).toBe(true);
		expect(outputs[0][0].every((x) => x === 0)).toBe(true);
		send(strike(0, 57, 220));
		run();
		expect(loud(outputs[0][0])).toBe(true);
	});

	it('gives every channel the same samples', async () => {
		const { send, run, outputs } = await start(2);
		send(strike(0, 57, 220));
		run();
		expect(outputs[0][1]).toEqual(outputs[0][0]);
	});

	it('obeys retune, mute, damp, level and stop, and ignores voices that are not there', async () => {
		const { send, run, outputs } = await start();
		send({ type: 'strike', slot: 3, plan: planFork(440, 0.8, RATE) });
		send(strike(0, 57, 220));
		send({ type: 'retune', slot: 0, string: 1, f1Hz: 221 });
		send({ type: 'retune', slot: 0, string: 7, f1Hz: 221 });
		send({ type: 'retune', slot: 99, string: 0, f1Hz: 221 });
		send({ type: 'mute', slot: 0, string: 2, muted: true });
		send({ type: 'damp', slot: 0 });
		for (let q = 0; q < 40; q += 1) run();
		expect(loud(outputs[0][0])).toBe(true);
		send({ type: 'level', linear: 0 });
		for (let q = 0; q < 20; q += 1) run();
		expect(outputs[0][0].every((x) => x === 0)).toBe(true);
		send({ type: 'level', linear: 1 });
		send({ type: 'stop' });
		for (let q = 0; q < 60; q += 1) run();
		expect(loud(outputs[0][0])).toBe(false);
	});

	it('ends when closed', async () => {
		const { send, run } = await start();
		send({ type: 'close' });
		expect(run()).toBe(false);
	});

	it('allocates nothing in process(): no typed array is made, and the heap does not grow by block', async () => {
		const { send, run } = await start();
		[57, 61, 64].forEach((midi, slot) => send(strike(slot, midi, 440 * 2 ** ((midi - 69) / 12))));
		for (let q = 0; q < 3000; q += 1) run();
		const kinds = ['Float32Array', 'Float64Array', 'Int32Array', 'Uint8Array', 'Array'] as const;
		let made = 0;
		for (const kind of kinds) {
			const Original = globalThis[kind] as unknown as new (...args: unknown[]) => object;
			vi.stubGlobal(
				kind,
				new Proxy(Original, {
					construct(target, args) {
						made += 1;
						return Reflect.construct(target, args);
					}
				})
			);
		}
		for (let q = 0; q < 200; q += 1) run();
		vi.unstubAllGlobals();
		expect(made).toBe(0);
		const before = process.memoryUsage().heapUsed;
		const blocks = 4000;
		for (let q = 0; q < blocks; q += 1) run();
		const grownPerBlock = (process.memoryUsage().heapUsed - before) / blocks;
		// One small array a block would already be more than this.
		expect(grownPerBlock).toBeLessThan(64);
	});
});
