import { checkLimits, refuseDamaged, refuseEmpty, refuseUnsupported } from './audio-refused';
import { hasText } from './sniff';

/** Decoded sound before it is mixed down. */
export interface DecodedChannels {
	channels: Float32Array[];
	sampleRateHz: number;
}

interface WavFormat {
	/** 1 integer PCM, 3 IEEE float */
	tag: number;
	channels: number;
	sampleRateHz: number;
	bytesPerSample: number;
}

const EXTENSIBLE = 0xfffe;
/** Bytes 2 to 15 of the sub-format identifier of PCM and float (Microsoft KSDATAFORMAT_SUBTYPE_*). */
const SUBTYPE_TAIL = [0, 0, 0, 0, 16, 0, 128, 0, 0, 170, 0, 56, 155, 113];

const FORMAT_NAMES: Record<number, string> = {
	2: 'ADPCM',
	6: 'A-law',
	7: 'µ-law',
	17: 'IMA ADPCM',
	85: 'MP3'
};

function readFormat(view: DataView, offset: number, size: number): WavFormat {
	if (size < 16) throw refuseDamaged('WAV', 'its format is not stated');
	let tag = view.getUint16(offset, true);
	const channels = view.getUint16(offset + 2, true);
	const sampleRateHz = view.getUint32(offset + 4, true);
	const blockBytes = view.getUint16(offset + 12, true);
	if (tag === EXTENSIBLE) {
		if (size < 40) throw refuseDamaged('WAV', 'its format is not stated');
		tag = view.getUint16(offset + 24, true);
		const known = SUBTYPE_TAIL.every((byte, i) => view.getUint8(offset + 26 + i) === byte);
		if (!known) throw refuseUnsupported('a WAV file with an unknown kind of sound in it');
	}
	if (channels === 0 || blockBytes === 0 || blockBytes % channels !== 0) {
		throw refuseDamaged('WAV', 'its format contradicts itself');
	}
	const bytesPerSample = blockBytes / channels;
	const readable =
		(tag === 1 && bytesPerSample >= 1 && bytesPerSample <= 4) ||
		(tag === 3 && (bytesPerSample === 4 || bytesPerSample === 8));
	if (!readable) {
		const name = FORMAT_NAMES[tag] ?? `unusual (format ${tag}, ${bytesPerSample * 8} bits)`;
		throw refuseUnsupported(`a WAV file with ${name} sound instead of PCM or float`);
	}
	return { tag, channels, sampleRateHz, bytesPerSample };
}

/** Reader of one sample as −1..1, by format; 8-bit PCM is unsigned, all wider PCM is signed. */
function sampleReader(view: DataView, format: WavFormat): (offset: number) => number {
	if (format.tag === 3) {
		return format.bytesPerSample === 4
			? (o) => view.getFloat32(o, true)
			: (o) => view.getFloat64(o, true);
	}
	switch (format.bytesPerSample) {
		case 1:
			return (o) => (view.getUint8(o) - 128) / 128;
		case 2:
			return (o) => view.getInt16(o, true) / 0x8000;
		case 3:
			return (o) => ((view.getInt8(o + 2) << 16) | view.getUint16(o, true)) / 0x800000;
		default:
			return (o) => view.getInt32(o, true) / 0x80000000;
	}
}

interface WavChunks {
	format: WavFormat | null;
	dataOffset: number;
	dataBytes: number;
}

/** Sizes 0 and 2³²−1 of the last chunk mean that its writer did not know them: the rest of the file. */
function findChunks(bytes: Uint8Array, view: DataView): WavChunks {
	let format: WavFormat | null = null;
	let offset = 12;
	while (offset + 8 <= bytes.length) {
		const size = view.getUint32(offset + 4, true);
		const body = offset + 8;
		const rest = bytes.length - body;
		if (hasText(bytes, offset, 'data')) {
			const unknown = size === 0xffffffff || (size === 0 && rest > 0);
			if (!unknown && size > rest) throw refuseDamaged('WAV', 'it ends before its sound does');
			return { format, dataOffset: body, dataBytes: unknown ? rest : size };
		}
		if (size > rest) break;
		if (hasText(bytes, offset, 'fmt ')) format = readFormat(view, body, size);
		offset = body + size + (size & 1);
	}
	return { format, dataOffset: 0, dataBytes: 0 };
}

/**
 * Reads a RIFF WAVE file: PCM of 8 to 32 bits, IEEE float of 32 and 64 bits, plain or extensible.
 * @throws AudioRefusedError for everything else, and for what is outside the limits
 */
export function decodeWav(bytes: Uint8Array): DecodedChannels {
	const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
	const { format, dataOffset, dataBytes } = findChunks(bytes, view);
	if (!format) throw refuseDamaged('WAV', 'its format is not stated');
	if (dataOffset === 0) throw refuseDamaged('WAV', 'its sound is missing');
	const frameBytes = format.bytesPerSample * format.channels;
	const frames = Math.floor(dataBytes / frameBytes);
	if (frames === 0) throw refuseEmpty();
	checkLimits(format.sampleRateHz, format.channels, frames);
	const read = sampleReader(view, format);
	const channels = Array.from({ length: format.channels }, (_, channel) => {
		const samples = new Float32Array(frames);
		let at = dataOffset + channel * format.bytesPerSample;
		for (let i = 0; i < frames; i++, at += frameBytes) samples[i] = read(at);
		return samples;
	});
	return { channels, sampleRateHz: format.sampleRateHz };
}
