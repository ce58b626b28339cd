import {
	checkLimits,
	MAX_SECONDS,
	PADDING_SECONDS,
	refuseDamaged,
	refuseEmpty,
	refuseTooLong
} from './audio-refused';
import { readFlacInfo } from './flac-info';
import { walkMpegFrames } from './mpeg-frames';
import { walkOggPages } from './ogg-pages';
import { id3v2Length } from './sniff';
import type { DecodedChannels } from './wav';

interface DecodedPart {
	channelData: Float32Array[];
	samplesDecoded: number;
	sampleRate: number;
	errors: readonly unknown[];
}

/** The part of the decoders' common shape that is used here. */
interface StreamDecoder {
	ready: Promise<void>;
	decode(bytes: Uint8Array): DecodedPart | Promise<DecodedPart>;
	flush?(): Promise<DecodedPart>;
	free(): void;
}

/** Bytes handed over at once: small, so that a file that unpacks to hours is stopped early. */
const PART_BYTES = 16_384;

/** Gathers the decoded parts; refuses as soon as the sound is too long or an error is reported. */
class Collector {
	private readonly parts: Float32Array[][] = [];
	private sampleRateHz = 0;
	private samples = 0;

	/** @param expected samples per channel that the file promises, 0 when it does not */
	constructor(
		private readonly format: string,
		private readonly expected: number
	) {}

	add(part: DecodedPart): void {
		if (part.errors.length > 0) {
			throw refuseDamaged(this.format, 'a part of it cannot be decoded');
		}
		if (part.samplesDecoded === 0) return;
		if (this.samples === 0) {
			this.sampleRateHz = part.sampleRate;
			checkLimits(part.sampleRate, part.channelData.length, 0);
		} else if (
			part.sampleRate !== this.sampleRateHz ||
			part.channelData.length !== this.parts[0].length
		) {
			throw refuseDamaged(this.format, 'its format changes in the middle');
		}
		this.parts.push(part.channelData.map((c) => c.subarray(0, part.samplesDecoded)));
		this.samples += part.samplesDecoded;
		if (this.samples > (MAX_SECONDS + PADDING_SECONDS) * this.sampleRateHz) throw refuseTooLong();
	}

	result(): DecodedChannels {
		// The parser drops a frame whose checksum fails, so a lost frame shows in the count alone.
		if (this.expected > 0 && this.samples !== this.expected) {
			throw refuseDamaged(this.format, 'a part of its sound is missing');
		}
		if (this.samples === 0) throw refuseEmpty();
		const channels = this.parts[0].map((_, channel) => {
			const whole = new Float32Array(this.samples);
			let at = 0;
			for (const part of this.parts) {
				whole.set(part[channel], at);
				at += part[channel].length;
			}
			return whole;
		});
		return { channels, sampleRateHz: this.sampleRateHz };
	}
}

async function decodeStream(
	format: string,
	bytes: Uint8Array,
	decoder: StreamDecoder,
	expected = 0
): Promise<DecodedChannels> {
	const collector = new Collector(format, expected);
	await decoder.ready;
	try {
		for (let at = 0; at < bytes.length; at += PART_BYTES) {
			collector.add(await decoder.decode(bytes.subarray(at, at + PART_BYTES)));
		}
		if (decoder.flush) collector.add(await decoder.flush());
		return collector.result();
	} finally {
		decoder.free();
	}
}

/** Native FLAC, with or without an ID3v2 tag in front. */
export async function decodeFlac(bytes: Uint8Array): Promise<DecodedChannels> {
	const start = id3v2Length(bytes);
	const info = readFlacInfo(bytes, start);
	if (!info) throw refuseDamaged('FLAC', 'its format is not stated');
	checkLimits(info.sampleRateHz, info.channels, info.samples);
	const { FLACDecoder } = await import('@wasm-audio-decoders/flac');
	return decodeStream('FLAC', bytes.subarray(start), new FLACDecoder(), info.samples);
}

function checkOgg(format: string, bytes: Uint8Array, granuleRateHz: number | null): void {
	const stream = walkOggPages(bytes);
	if (stream.fault) throw refuseDamaged(format, stream.fault);
	if (granuleRateHz) checkLimits(granuleRateHz, 1, stream.lastGranule);
}

/** Ogg Vorbis (RFC 3533, Vorbis I §4.2.2: the rate stands 12 bytes into the first packet). */
export async function decodeOggVorbis(bytes: Uint8Array): Promise<DecodedChannels> {
	const rateAt = 27 + bytes[26] + 12;
	if (rateAt + 4 > bytes.length) throw refuseDamaged('Ogg Vorbis', 'its format is not stated');
	const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
	checkOgg('Ogg Vorbis', bytes, view.getUint32(rateAt, true));
	const { OggVorbisDecoder } = await import('@wasm-audio-decoders/ogg-vorbis');
	return decodeStream('Ogg Vorbis', bytes, new OggVorbisDecoder());
}

/** Ogg Opus (RFC 7845: granule positions count 48 kHz samples whatever went in). */
export async function decodeOggOpus(bytes: Uint8Array): Promise<DecodedChannels> {
	checkOgg('Ogg Opus', bytes, 48_000);
	const { OggOpusDecoder } = await import('ogg-opus-decoder');
	return decodeStream('Ogg Opus', bytes, new OggOpusDecoder());
}

export async function decodeOggFlac(bytes: Uint8Array): Promise<DecodedChannels> {
	checkOgg('Ogg FLAC', bytes, null);
	const { FLACDecoder } = await import('@wasm-audio-decoders/flac');
	return decodeStream('Ogg FLAC', bytes, new FLACDecoder());
}

export async function decodeMp3(bytes: Uint8Array): Promise<DecodedChannels> {
	const stream = walkMpegFrames(bytes, id3v2Length(bytes));
	if (!stream) throw refuseDamaged('MP3', 'no sound follows its heading');
	checkLimits(stream.sampleRateHz, stream.channels, stream.samples);
	if (!stream.whole) throw refuseDamaged('MP3', 'it breaks off or has other data in the middle');
	const { MPEGDecoder } = await import('mpg123-decoder');
	const decoder: StreamDecoder = new MPEGDecoder();
	return decodeStream('MP3', bytes.subarray(stream.start, stream.end), decoder);
}
