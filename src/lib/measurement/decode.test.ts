import { existsSync, readFileSync } from 'node:fs';
import { beforeAll, describe, expect, it, vi } from 'vitest';
import { AudioRefusedError, decodeAudio, MAX_FILE_BYTES } from './decode';

const FIXTURES = new URL('../../../fixtures/', import.meta.url);
const fixture = (path: string) => new Uint8Array(readFileSync(new URL(path, FIXTURES)));

async function refusal(bytes: Uint8Array): Promise<AudioRefusedError> {
	try {
		await decodeAudio(bytes);
	} catch (error) {
		if (error instanceof AudioRefusedError) return error;
		throw error;
	}
	throw new Error('the file was accepted');
}

/** Largest correlation coefficient of `b` against `a` over small lags. */
function bestMatch(a: Float32Array, b: Float32Array, maxLag: number): { r: number; lag: number } {
	const from = 4800;
	const n = Math.min(a.length, b.length) - 2 * from;
	let best = { r: -1, lag: 0 };
	for (let lag = -maxLag; lag <= maxLag; lag++) {
		let ab = 0;
		let aa = 0;
		let bb = 0;
		for (let i = from; i < from + n; i++) {
			ab += a[i] * b[i + lag];
			aa += a[i] * a[i];
			bb += b[i + lag] * b[i + lag];
		}
		const r = ab / Math.sqrt(aa * bb);
		if (r > best.r) best = { r, lag };
	}
	return best;
}

describe('decodeAudio reads each format of one two-second clip', () => {
	let original: Float32Array;
	beforeAll(async () => {
		original = (await decodeAudio(fixture('formats/c3.flac'))).samples;
	});

	it('FLAC: every sample, peak as levelled', () => {
		expect(original.length).toBe(96_000);
		const peak = original.reduce((max, x) => Math.max(max, Math.abs(x)), 0);
		expect(peak).toBeGreaterThan(0.69);
		expect(peak).toBeLessThan(0.72);
	});

	it('Ogg FLAC: the same samples', async () => {
		const { samples, sampleRateHz } = await decodeAudio(fixture('formats/c3.oga'));
		expect(sampleRateHz).toBe(48_000);
		expect(samples).toEqual(original);
	});

	it.each([
		['Ogg Vorbis', 'formats/c3.ogg', 0.995],
		['Ogg Opus', 'formats/c3.opus', 0.99],
		['MP3, constant bit rate', 'formats/c3.mp3', 0.995],
		['MP3, variable bit rate with a tag', 'formats/c3-vbr-tagged.mp3', 0.995]
	])('%s: the same sound in the same place', async (_, path, similar) => {
		const { samples, sampleRateHz } = await decodeAudio(fixture(path));
		expect(sampleRateHz).toBe(48_000);
		expect(samples.length).toBe(96_000);
		const { r, lag } = bestMatch(original, samples, 3);
		expect(r).toBeGreaterThan(similar);
		expect(Math.abs(lag)).toBeLessThanOrEqual(1);
	});

	it('all real clips', async () => {
		const list = readFileSync(new URL('recordings/truth.csv', FIXTURES), 'utf8');
		const names = new Set(list.match(/grand-[a-z0-9-]+/g));
		const clips = [...names].map((name) => `recordings/${name}.flac`);
		const present = clips.filter((path) => existsSync(new URL(path, FIXTURES)));
		expect(present.length).toBe(28);
		for (const path of present) {
			const { samples, sampleRateHz } = await decodeAudio(fixture(path));
			expect(sampleRateHz).toBe(48_000);
			expect(samples.length).toBeGreaterThan(2 * 48_000);
			expect(samples.length).toBeLessThanOrEqual(7 * 48_000);
		}
	});
});

describe('decodeAudio refuses damaged files', () => {
	const files = ['c3.flac', 'c3.oga', 'c3.ogg', 'c3.opus', 'c3.mp3'];
	const quiet = () => vi.spyOn(console, 'error').mockImplementation(() => undefined);

	it.each(files)('%s cut in the middle', async (name) => {
		const spy = quiet();
		const whole = fixture(`formats/${name}`);
		const error = await refusal(whole.subarray(0, Math.floor(whole.length * 0.6)));
		expect(error.refusal).toBe('damaged');
		expect(error.message).toMatch(/^This .+ file is damaged: .+\. Export or record it again\.$/);
		spy.mockRestore();
	});

	it.each(files)('%s with a stretch overwritten', async (name) => {
		const spy = quiet();
		const bytes = fixture(`formats/${name}`);
		const middle = Math.floor(bytes.length / 2);
		for (let i = 0; i < 3000; i++) bytes[middle + i] = (i * 37) & 0x7f;
		expect((await refusal(bytes)).refusal).toBe('damaged');
		spy.mockRestore();
	});

	it.each(['c3.flac', 'c3.oga', 'c3.ogg', 'c3.opus'])('%s with one bit turned', async (name) => {
		const spy = quiet();
		const bytes = fixture(`formats/${name}`);
		bytes[Math.floor(bytes.length * 0.7)] ^= 4;
		expect((await refusal(bytes)).refusal).toBe('damaged');
		spy.mockRestore();
	});

	it.each(files)('%s with a stretch removed', async (name) => {
		const spy = quiet();
		const bytes = fixture(`formats/${name}`);
		const middle = Math.floor(bytes.length / 2);
		const cut = new Uint8Array(bytes.length - 1111);
		cut.set(bytes.subarray(0, middle));
		cut.set(bytes.subarray(middle + 1111), middle);
		expect((await refusal(cut)).refusal).toBe('damaged');
		spy.mockRestore();
	});

	it.each(files)('%s with nothing but its first bytes', async (name) => {
		const spy = quiet();
		const bytes = fixture(`formats/${name}`);
		for (const length of [4, 12, 27, 40, 60, 100]) {
			const error = await refusal(bytes.subarray(0, length));
			expect(['damaged', 'unknown-format', 'unsupported']).toContain(error.refusal);
		}
		spy.mockRestore();
	});
});

describe('decodeAudio refuses what is outside its limits', () => {
	it('a file over 20 MB, with its size', async () => {
		const error = await refusal(new Uint8Array(MAX_FILE_BYTES + 1));
		expect(error.refusal).toBe('too-large');
		expect(error.message).toBe(
			'This file is 20.1 MB and the limit is 20 MB: cut it to one strike and try again.'
		);
	});

	it('an MP3 of more than 30 s, before decoding it', async () => {
		const once = fixture('formats/c3.mp3');
		// The first frame is the encoder's own (its tag states the length); the rest repeats.
		const body = once.subarray(384);
		const many = new Uint8Array(384 + 16 * body.length);
		many.set(once.subarray(0, 384));
		for (let i = 0; i < 16; i++) many.set(body, 384 + i * body.length);
		const error = await refusal(many);
		expect(error.refusal).toBe('too-long');
	});

	it('a FLAC that says it is longer than 30 s', async () => {
		const bytes = fixture('formats/c3.flac');
		new DataView(bytes.buffer).setUint32(4 + 4 + 14, 48_000 * 31);
		const error = await refusal(bytes);
		expect(error.refusal).toBe('too-long');
		expect(error.message).toContain('30 seconds');
	});

	it.each([
		[
			'text',
			new TextEncoder().encode('Not a sound, only words about one.'),
			'unknown-format',
			'WAV'
		],
		['nothing', new Uint8Array(0), 'unknown-format', 'WAV'],
		['PNG', new Uint8Array([137, 80, 78, 71, 13, 10, 26, 10, 0, 0, 0, 0]), 'unknown-format', 'WAV'],
		[
			'MP4',
			new TextEncoder().encode('\0\0\0 ftypM4A \0\0\0\0'),
			'unsupported',
			'an MP4 or M4A file'
		],
		['AIFF', new TextEncoder().encode('FORM\0\0\0\0AIFF'), 'unsupported', 'an AIFF file'],
		['MIDI', new TextEncoder().encode('MThd\0\0\0\x06\0\0'), 'unsupported', 'a MIDI file']
	])('%s, by its content', async (_, bytes, kind, words) => {
		const error = await refusal(bytes);
		expect(error.refusal).toBe(kind);
		expect(error.message).toContain(words);
		expect(error.message).toMatch(/\.$/);
	});
});
