import { describe, expect, it } from 'vitest';
import { AudioRefusedError, decodeAudio } from '../decode';

interface WavOptions {
	sampleRateHz?: number;
	format?: 'pcm' | 'float';
	bits?: number;
	extensible?: boolean;
	extraChunk?: string;
}

function writeSample(
	view: DataView,
	at: number,
	value: number,
	format: string,
	bits: number
): void {
	const step = 2 ** (bits - 1);
	const whole = Math.max(-step, Math.min(step - 1, Math.round(value * step)));
	if (format === 'float' && bits === 32) view.setFloat32(at, value, true);
	else if (format === 'float') view.setFloat64(at, value, true);
	else if (bits === 8) view.setUint8(at, whole + 128);
	else for (let i = 0; i < bits / 8; i++) view.setUint8(at + i, Math.floor(whole / 256 ** i) & 255);
}

/** A WAV file written by the format's description, independently of the reader under test. */
function wavFile(channels: Float32Array[], options: WavOptions): Uint8Array {
	const { sampleRateHz = 48_000, format = 'pcm', bits = 16, extensible, extraChunk } = options;
	const fmtBytes = extensible ? 40 : 16;
	const extraBytes = extraChunk ? 8 + extraChunk.length + (extraChunk.length & 1) : 0;
	const block = (channels.length * bits) / 8;
	const dataBytes = channels[0].length * block;
	const bytes = new Uint8Array(12 + 8 + fmtBytes + extraBytes + 8 + dataBytes);
	const view = new DataView(bytes.buffer);
	const text = (at: number, words: string) => bytes.set(new TextEncoder().encode(words), at);
	const tag = format === 'pcm' ? 1 : 3;
	text(0, 'RIFF');
	view.setUint32(4, bytes.length - 8, true);
	text(8, 'WAVEfmt ');
	view.setUint32(16, fmtBytes, true);
	view.setUint16(20, extensible ? 0xfffe : tag, true);
	view.setUint16(22, channels.length, true);
	view.setUint32(24, sampleRateHz, true);
	view.setUint32(28, sampleRateHz * block, true);
	view.setUint16(32, block, true);
	view.setUint16(34, bits, true);
	if (extensible) {
		view.setUint16(36, 22, true);
		view.setUint16(38, bits, true);
		view.setUint16(44, tag, true);
		bytes.set([0, 0, 0, 0, 16, 0, 128, 0, 0, 170, 0, 56, 155, 113], 46);
	}
	let at = 20 + fmtBytes;
	if (extraChunk) {
		text(at, 'LIST');
		view.setUint32(at + 4, extraChunk.length, true);
		text(at + 8, extraChunk);
		at += extraBytes;
	}
	text(at, 'data');
	view.setUint32(at + 4, dataBytes, true);
	for (let i = 0; i < channels[0].length; i++) {
		channels.forEach((channel, c) =>
			writeSample(view, at + 8 + i * block + (c * bits) / 8, channel[i], format, bits)
		);
	}
	return bytes;
}

const wave = (n: number) => Float32Array.from({ length: n }, (_, i) => 0.6 * Math.sin(i / 7));

async function refusal(bytes: Uint8Array): Promise<AudioRefusedError> {
	const error: unknown = await decodeAudio(bytes).then(
		() => null,
		(e: unknown) => e
	);
	if (!(error instanceof AudioRefusedError)) throw new Error('not refused');
	return error;
}

function largestError(a: Float32Array, b: Float32Array): number {
	return a.reduce((max, x, i) => Math.max(max, Math.abs(x - b[i])), 0);
}

describe('WAV', () => {
	it.each([
		['pcm', 8, 1 / 128],
		['pcm', 16, 1 / 32768],
		['pcm', 24, 1 / 8388608],
		['pcm', 32, 1e-7],
		['float', 32, 0],
		['float', 64, 0]
	] as const)('%s of %i bits, plain and extensible', async (format, bits, step) => {
		const samples = wave(500);
		for (const extensible of [false, true]) {
			const bytes = wavFile([samples], { sampleRateHz: 44_100, format, bits, extensible });
			const decoded = await decodeAudio(bytes);
			expect(decoded.sampleRateHz).toBe(44_100);
			expect(decoded.samples.length).toBe(500);
			expect(largestError(decoded.samples, samples)).toBeLessThanOrEqual(step);
		}
	});

	it('mixes channels down to their mean', async () => {
		const left = wave(100);
		const right = left.map((x) => x / 2);
		const { samples } = await decodeAudio(wavFile([left, right], { format: 'float', bits: 32 }));
		expect(
			largestError(
				samples,
				left.map((x) => 0.75 * x)
			)
		).toBeLessThan(1e-7);
	});

	it('skips other chunks, odd ones included, and takes an unstated length to the end', async () => {
		const bytes = wavFile([wave(64)], { extraChunk: 'odd' });
		expect((await decodeAudio(bytes)).samples.length).toBe(64);
		for (const size of [0, 0xffffffff]) {
			const open = wavFile([wave(64)], {});
			new DataView(open.buffer).setUint32(40, size, true);
			expect((await decodeAudio(open)).samples.length).toBe(64);
		}
	});

	it('refuses a file cut short, one without sound and one without a format', async () => {
		const whole = wavFile([wave(400)], {});
		expect((await refusal(whole.subarray(0, 600))).message).toBe(
			'This WAV file is damaged: it ends before its sound does. Export or record it again.'
		);
		expect((await refusal(whole.subarray(0, 40))).refusal).toBe('damaged');
		expect((await refusal(whole.subarray(0, 20))).refusal).toBe('damaged');
		expect((await refusal(wavFile([new Float32Array(0)], {}))).refusal).toBe('empty');
	});

	it('refuses values that are no numbers', async () => {
		const bytes = wavFile([Float32Array.of(0, NaN, 0)], { format: 'float', bits: 32 });
		expect((await refusal(bytes)).refusal).toBe('damaged');
	});

	it('refuses other codecs by name', async () => {
		const bytes = wavFile([wave(10)], {});
		new DataView(bytes.buffer).setUint16(20, 7, true);
		expect((await refusal(bytes)).message).toContain('µ-law');
	});

	it.each([4_000, 192_001, 0])('refuses %i samples per second', async (sampleRateHz) => {
		expect((await refusal(wavFile([wave(10)], { sampleRateHz }))).refusal).toBe('sample-rate');
	});

	it.each([8_000, 192_000])('accepts %i samples per second', async (sampleRateHz) => {
		const decoded = await decodeAudio(wavFile([wave(10)], { sampleRateHz }));
		expect(decoded.sampleRateHz).toBe(sampleRateHz);
	});

	it('accepts 30 s and refuses 31 s', async () => {
		const sampleRateHz = 8_000;
		const { samples } = await decodeAudio(wavFile([wave(30 * sampleRateHz)], { sampleRateHz }));
		expect(samples.length).toBe(240_000);
		const error = await refusal(wavFile([wave(31 * sampleRateHz)], { sampleRateHz }));
		expect(error.refusal).toBe('too-long');
	});
});
