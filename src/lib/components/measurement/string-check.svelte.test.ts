import { describe, expect, it, vi } from 'vitest';
import type { Analysis, AnalysisClient } from '../../measurement/client';
import { AudioRefusedError } from '../../measurement/formats/audio-refused';
import type { MicrophoneListener } from '../../measurement/microphone';
import { MicrophoneError } from '../../measurement/microphone-error';
import type { MicrophoneFacts } from '../../measurement/microphone-facts';
import { RecordKeeper, recordOf } from './record-keeper.svelte';
import { KeptRecords, type SendOutcome } from './record';
import { StringCheck } from './string-check.svelte';
import { finding, note } from './test-findings';

const RATE = 8_000;
const ANALYSIS: Analysis = finding({}, { notes: [note('A3', 220)] }).analysis;

function facts(more: Partial<MicrophoneFacts> = {}): MicrophoneFacts {
	return {
		sampleRateHz: RATE,
		echoCancellation: false,
		noiseSuppression: false,
		autoGainControl: false,
		label: 'built-in',
		processed: false,
		...more
	};
}

function setUp(open: Partial<MicrophoneFacts> | MicrophoneError = {}) {
	const closed = vi.fn();
	let listener: MicrophoneListener | null = null;
	const client = {
		analyseClip: vi.fn(async () => ANALYSIS),
		analyseFile: vi.fn(async () => ANALYSIS),
		close: vi.fn()
	} satisfies AnalysisClient;
	const check = new StringCheck({
		openMicrophone: async (l) => {
			if (open instanceof MicrophoneError) throw open;
			listener = l;
			return { facts: facts(open), close: closed };
		},
		client: async () => client
	});
	const hear = (samples: Float32Array) => {
		for (let i = 0; i < samples.length; i += 256) listener?.onBlock(samples.subarray(i, i + 256));
	};
	return { check, client, closed, hear, fault: (e: MicrophoneError) => listener?.onFault(e) };
}

const quiet = (seconds: number) =>
	Float32Array.from({ length: seconds * RATE }, (_, i) => 1e-4 * Math.sin(i * i));
const tone = (seconds: number) =>
	Float32Array.from(
		{ length: seconds * RATE },
		(_, i) => 0.3 * Math.exp(-i / RATE) * Math.sin((2 * Math.PI * 220 * i) / RATE)
	);

describe('StringCheck', () => {
	it('listens, hears a strike, closes the microphone, measures and shows', async () => {
		const { check, client, closed, hear } = setUp();
		check.kind = 'note';
		await check.listen();
		expect(check.stage).toMatchObject({ name: 'listening', heard: 'quiet-first' });
		hear(quiet(1));
		expect(check.stage).toMatchObject({ name: 'listening', heard: 'waiting' });
		hear(tone(3));
		expect(check.stage).toMatchObject({ name: 'listening', heard: 'ringing' });
		expect(closed).not.toHaveBeenCalled();
		hear(tone(2).map((x) => x * 0.05));
		expect(closed).toHaveBeenCalledTimes(1);
		await vi.waitFor(() => expect(check.stage.name).toBe('found'));
		const [clip, options] = client.analyseClip.mock.calls[0] as unknown as [
			{ samples: Float32Array; strikeSample: number },
			object
		];
		expect(clip.samples.length).toBe(4 * RATE + clip.strikeSample);
		expect(options).toEqual({ kind: 'note', notes: [57], seconds: 4 });
		expect(check.canMeasureAgain).toBe(true);
		check.lowMidi = 60;
		await check.measureAgain();
		expect(client.analyseClip).toHaveBeenCalledTimes(2);
		check.close();
		expect(check.canMeasureAgain).toBe(false);
	});

	it('gives no verdict when the browser kept processing on', async () => {
		const { check, client, closed } = setUp({ noiseSuppression: true, processed: true });
		await check.listen();
		expect(check.stage).toMatchObject({ name: 'processed' });
		expect(closed).toHaveBeenCalled();
		expect(client.analyseClip).not.toHaveBeenCalled();
	});

	it('says why there is no microphone, and why it stopped', async () => {
		const denied = setUp(new MicrophoneError('denied'));
		await denied.check.listen();
		expect(denied.check.stage).toMatchObject({
			name: 'fault',
			text: { title: 'The browser refuses the microphone.' }
		});
		const gone = setUp();
		await gone.check.listen();
		gone.fault(new MicrophoneError('ended'));
		expect(gone.check.stage).toMatchObject({
			name: 'fault',
			text: { title: 'The microphone went away.' }
		});
	});

	it('stops waiting after a minute without a strike', async () => {
		const { check, hear, closed } = setUp();
		await check.listen();
		hear(quiet(62));
		expect(check.stage.name).toBe('no-strike');
		expect(closed).toHaveBeenCalled();
	});

	it('stopping lets the microphone go and drops a late answer', async () => {
		const { check, hear, closed } = setUp();
		await check.listen();
		hear(quiet(1));
		hear(tone(5));
		check.stop();
		await Promise.resolve();
		await new Promise((resolve) => setTimeout(resolve, 5));
		expect(check.stage.name).toBe('choosing');
		expect(closed).toHaveBeenCalled();
	});

	it('measures a file, and says on the spot why one is refused', async () => {
		const { check, client } = setUp();
		await check.takeFile(new File([new Uint8Array(10)], 'a.wav'));
		expect(check.stage).toMatchObject({
			name: 'found',
			finding: { source: 'file', microphone: null }
		});
		client.analyseFile.mockRejectedValueOnce(
			new AudioRefusedError('too-long', 'Too long, cut it.')
		);
		await check.takeFile(new File([new Uint8Array(10)], 'b.wav'));
		expect(check.stage.name).toBe('choosing');
		expect(check.fileError).toBe('Too long, cut it.');
	});

	it('refuses a file over 20 MB without reading it', async () => {
		const { check, client } = setUp();
		const big = new File(['x'], 'big.wav');
		Object.defineProperty(big, 'size', { value: 20_000_001 });
		await check.takeFile(big);
		expect(check.fileError).toContain('the limit is 20 MB');
		expect(client.analyseFile).not.toHaveBeenCalled();
	});

	it('names both notes of an interval', () => {
		const { check } = setUp();
		expect(check.noteNames).toEqual(['A3', 'D4']);
		check.kind = 'unison';
		expect(check.noteNames).toEqual(['A3']);
	});
});

describe('RecordKeeper', () => {
	const found = finding({}, { notes: [note('A3', 220)] });
	const memory = () => {
		const map = new Map<string, string>();
		return {
			getItem: (key: string) => map.get(key) ?? null,
			setItem: (key: string, value: string) => void map.set(key, value),
			removeItem: (key: string) => void map.delete(key)
		};
	};

	it('makes a record of names and numbers only', () => {
		const record = recordOf(found, 'desktop-chromium', '2025-01-01T00:00:00.000Z');
		expect(record).toMatchObject({ kind: 'interval', notes: ['A3', 'D4'], source: 'microphone' });
		expect(record.id).toMatch(
			/^[0-9a-f]{8}-[0-9a-f]{4}-4[0-9a-f]{3}-[89ab][0-9a-f]{3}-[0-9a-f]{12}$/
		);
		expect(JSON.stringify(record).length).toBeLessThan(2000);
	});

	it('keeps what could not be stored and sends it later under the same id', async () => {
		const outcomes: SendOutcome[] = ['later', 'stored'];
		const ids: string[] = [];
		const store = memory();
		const keeper = new RecordKeeper(new KeptRecords('me', store), async (record) => {
			ids.push(record.id);
			return outcomes.shift() ?? 'stored';
		});
		await keeper.store(recordOf(found, 'desktop-chromium', '2025-01-01T00:00:00.000Z'));
		expect(keeper.state).toBe('kept');
		expect(keeper.waiting).toBe(1);
		await keeper.tryAgain();
		expect(keeper.state).toBe('stored');
		expect(keeper.waiting).toBe(0);
		expect(new Set(ids).size).toBe(1);
	});
});
