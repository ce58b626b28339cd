import {
	AudioRefusedError,
	MAX_FILE_BYTES,
	refuseDamaged,
	refuseTooLarge,
	refuseUnknown,
	refuseUnsupported
} from './formats/audio-refused';
import {
	decodeFlac,
	decodeMp3,
	decodeOggFlac,
	decodeOggOpus,
	decodeOggVorbis
} from './formats/compressed';
import { sniffFormat } from './formats/sniff';
import { decodeWav, type DecodedChannels } from './formats/wav';

export { AudioRefusedError, MAX_FILE_BYTES, MAX_SECONDS } from './formats/audio-refused';
export type { AudioRefusal } from './formats/audio-refused';

/** One channel of sound. */
export interface DecodedAudio {
	/** mono samples; float files may go beyond ±1 */
	samples: Float32Array;
	sampleRateHz: number;
}

const FORMATS: Record<
	string,
	{ name: string; decode: (bytes: Uint8Array) => DecodedChannels | Promise<DecodedChannels> }
> = {
	wav: { name: 'WAV', decode: decodeWav },
	flac: { name: 'FLAC', decode: decodeFlac },
	'ogg-vorbis': { name: 'Ogg Vorbis', decode: decodeOggVorbis },
	'ogg-opus': { name: 'Ogg Opus', decode: decodeOggOpus },
	'ogg-flac': { name: 'Ogg FLAC', decode: decodeOggFlac },
	mp3: { name: 'MP3', decode: decodeMp3 }
};

/** Mean of the channels; a single channel is passed on as it is. */
function mixDown({ channels }: DecodedChannels): Float32Array {
	if (channels.length === 1) return channels[0];
	const mono = new Float32Array(channels[0].length);
	for (const channel of channels) {
		for (let i = 0; i < mono.length; i++) mono[i] += channel[i] / channels.length;
	}
	return mono;
}

/**
 * Decodes a sound file to one channel, alike in browser and Node. WAV, FLAC, Ogg (Vorbis, Opus,
 * FLAC) and MP3 are told apart by their content; decoders are loaded when first needed.
 * @param bytes the whole file, at most 20 MB; the sound at most 30 s, 8 to 192 kHz, 8 channels
 * @throws AudioRefusedError with one clear sentence for everything else, damaged files included
 */
export async function decodeAudio(bytes: Uint8Array): Promise<DecodedAudio> {
	if (bytes.length > MAX_FILE_BYTES) throw refuseTooLarge(bytes.length);
	const sniffed = sniffFormat(bytes);
	if (sniffed.kind === 'unknown') throw refuseUnknown();
	if (sniffed.kind === 'other') throw refuseUnsupported(sniffed.what);
	const format = FORMATS[sniffed.kind];
	let decoded: DecodedChannels;
	try {
		decoded = await format.decode(bytes);
	} catch (error) {
		if (error instanceof AudioRefusedError) throw error;
		throw refuseDamaged(format.name, 'it cannot be decoded');
	}
	const samples = mixDown(decoded);
	if (!samples.every(Number.isFinite)) {
		throw refuseDamaged(format.name, 'it holds values that are no numbers');
	}
	return { samples, sampleRateHz: decoded.sampleRateHz };
}
