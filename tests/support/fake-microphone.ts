/**
 * Makes the file that Chromium's fake capture device plays: a real recording, resampled to the device's
 * 44.1 kHz, after a second of near-silence so that its strike is heard as one.
 */
import { mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { dirname } from 'node:path';
import { decodeAudio } from '../../src/lib/measurement/decode';

const DEVICE_RATE_HZ = 44_100;
/** The device reads blocks of 10 ms: a length that is not a multiple of this clicks at the loop. */
const BLOCK = 441;
const HALF_WIDTH = 32;

/** Windowed-sinc resampling (Hann window, 64 taps); the pass band ends at 0.92 of the lower Nyquist rate. */
export function resample(samples: Float32Array, fromHz: number, toHz: number): Float32Array {
	const cutoff = 0.92 * Math.min(1, toHz / fromHz);
	const out = new Float32Array(Math.floor((samples.length * toHz) / fromHz));
	for (let i = 0; i < out.length; i++) {
		const centre = (i * fromHz) / toHz;
		const first = Math.floor(centre) - HALF_WIDTH + 1;
		let sum = 0;
		for (let j = Math.max(0, first); j < Math.min(samples.length, first + 2 * HALF_WIDTH); j++) {
			const x = centre - j;
			const sinc = x === 0 ? cutoff : Math.sin(Math.PI * cutoff * x) / (Math.PI * x);
			sum += samples[j] * sinc * (0.5 + 0.5 * Math.cos((Math.PI * x) / HALF_WIDTH));
		}
		out[i] = sum;
	}
	return out;
}

/** 16-bit mono WAV bytes. */
export function wavBytes(samples: Float32Array, sampleRateHz: number): Buffer {
	const data = Buffer.alloc(44 + samples.length * 2);
	data.write('RIFF', 0);
	data.writeUInt32LE(36 + samples.length * 2, 4);
	data.write('WAVEfmt ', 8);
	data.writeUInt32LE(16, 16);
	data.writeUInt16LE(1, 20);
	data.writeUInt16LE(1, 22);
	data.writeUInt32LE(sampleRateHz, 24);
	data.writeUInt32LE(sampleRateHz * 2, 28);
	data.writeUInt16LE(2, 32);
	data.writeUInt16LE(16, 34);
	data.write('data', 36);
	data.writeUInt32LE(samples.length * 2, 40);
	samples.forEach((value, i) => {
		data.writeInt16LE(Math.round(32_767 * Math.max(-1, Math.min(1, value))), 44 + 2 * i);
	});
	return data;
}

/** Writes `target` (WAV) from the recording `source`. */
export async function prepareFakeMicrophone(source: string, target: string): Promise<void> {
	const { samples, sampleRateHz } = await decodeAudio(new Uint8Array(readFileSync(source)));
	const tone = resample(samples, sampleRateHz, DEVICE_RATE_HZ);
	const length = Math.ceil((DEVICE_RATE_HZ + tone.length) / BLOCK) * BLOCK;
	const all = new Float32Array(length);
	// One step of 16-bit noise: a dead-silent device would be taken for a muted one.
	for (let i = 0; i < length; i++) all[i] = ((i * 7919) % 3) - 1 > 0 ? 1 / 32_767 : 0;
	all.set(tone, DEVICE_RATE_HZ);
	mkdirSync(dirname(target), { recursive: true });
	writeFileSync(target, wavBytes(all, DEVICE_RATE_HZ));
}
