import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { voice } from './testing/render-voices';
import type { StringsMessage } from './worklets/messages';

const sent: StringsMessage[] = [];
const levels: number[] = [];
let clock = 0;
let started: { at: number; ends: number }[] = [];

class FakeParam {
	value = 1;
	setTargetAtTime(level: number) {
		levels.push(level);
	}
	setValueAtTime() {}
	linearRampToValueAtTime() {}
	cancelScheduledValues() {}
}

class FakeNode {
	gain = new FakeParam();
	frequency = new FakeParam();
	buffer: { duration: number } | null = null;
	onended: (() => void) | null = null;
	private played = { at: 0, ends: 0 };
	connect(to: FakeNode) {
		return to;
	}
	disconnect() {}
	start(at: number) {
		this.played.at = at;
		started.push(this.played);
	}
	stop(at: number) {
		this.played.ends = at;
		queueMicrotask(() => this.onended?.());
	}
}

class FakeContext {
	sampleRate = 44_100;
	baseLatency = 0.01;
	outputLatency = undefined;
	state = 'running';
	destination = new FakeNode();
	audioWorklet: { addModule(url: string): Promise<void> } | undefined = {
		addModule: async () => undefined
	};
	get currentTime() {
		return clock;
	}
	createGain = () => new FakeNode();
	createBufferSource = () => new FakeNode();
	createOscillator = () => new FakeNode();
	createBuffer = (_channels: number, length: number, rate: number) => ({
		duration: length / rate,
		getChannelData: () => new Float32Array(length)
	});
	resume = async () => undefined;
	close = async () => void (this.state = 'closed');
}

beforeEach(() => {
	sent.length = 0;
	levels.length = 0;
	started = [];
	clock = 0;
	vi.stubGlobal('AudioContext', FakeContext);
	vi.stubGlobal(
		'AudioWorkletNode',
		class extends FakeNode {
			port = { postMessage: (message: StringsMessage) => sent.push(message) };
		}
	);
});
afterEach(() => vi.unstubAllGlobals());

async function engine() {
	const { createToneEngine } = await import('./engine');
	return createToneEngine();
}

describe('the sound engine of the browser', () => {
	it('strikes each named voice in a place of its own and keeps to it', async () => {
		const tone = await engine();
		tone.strike(voice(57, [220], { id: 'low' }));
		tone.strike(voice(61, [277], { id: 'high' }));
		tone.retune('high', 0, 278);
		tone.strike(voice(57, [220], { id: 'low' }));
		tone.damp('high');
		expect(sent.map((message) => [message.type, 'slot' in message ? message.slot : -1])).toEqual([
			['strike', 0],
			['strike', 1],
			['retune', 1],
			['strike', 0],
			['damp', 1]
		]);
	});

	it('ignores voices that were never struck', async () => {
		const tone = await engine();
		tone.retune('nobody', 0, 220);
		tone.damp('nobody');
		tone.mute('nobody', 0, true);
		expect(sent).toEqual([]);
	});

	it('states the device facts, 0 where the browser keeps silent', async () => {
		const tone = await engine();
		expect(tone.sampleRateHz).toBe(44_100);
		expect(tone.baseLatencySeconds).toBe(0.01);
		expect(tone.outputLatencySeconds).toBe(0);
	});

	it('caps the level', async () => {
		const { LEVEL_CAP } = await import('./engine');
		const tone = await engine();
		for (const level of [0.4, 5, -1, Number.NaN]) tone.setLevel(level);
		expect(levels).toEqual([0.4, LEVEL_CAP, 0, 0]);
	});

	it('plays a finished sound for its length, or until stopped', async () => {
		const tone = await engine();
		const playback = tone.playSamples(new Float32Array(48_000), 48_000);
		expect(started[0].ends - started[0].at).toBeCloseTo(1, 9);
		await playback.ended;
		tone.playPartial(880, 0.5);
		expect(started[1].ends - started[1].at).toBeCloseTo(0.5, 9);
	});

	it('resumes when the clock advances, and says so when it is frozen', async () => {
		vi.useFakeTimers();
		try {
			const tone = await engine();
			const frozen = expect(tone.resume()).rejects.toThrow(/stands still/);
			await vi.advanceTimersByTimeAsync(2000);
			await frozen;
			const fine = tone.resume();
			clock = 0.1;
			await vi.advanceTimersByTimeAsync(100);
			await fine;
		} finally {
			vi.useRealTimers();
		}
	});

	it('says in plain words what is missing', async () => {
		vi.stubGlobal('AudioContext', undefined);
		await expect(engine()).rejects.toThrow(/cannot make sound/);
		vi.stubGlobal(
			'AudioContext',
			class extends FakeContext {
				override audioWorklet = undefined;
			}
		);
		await expect(engine()).rejects.toThrow(/HTTPS/);
	});
});
