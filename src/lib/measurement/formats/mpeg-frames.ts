/**
 * MPEG-1, -2 and -2.5 Layer III frame headers (ISO/IEC 11172-3 §2.4.1.3, ISO/IEC 13818-3 §2.4.2).
 * The decoder resynchronises silently after damage, which would glue two moments of a tone
 * together and bend every beat, so the frames are walked here first.
 */
export interface MpegFrame {
	/** whole frame, header included */
	bytes: number;
	samples: number;
	sampleRateHz: number;
	channels: 1 | 2;
}

const KBPS_V1 = [0, 32, 40, 48, 56, 64, 80, 96, 112, 128, 160, 192, 224, 256, 320];
const KBPS_V2 = [0, 8, 16, 24, 32, 40, 48, 56, 64, 80, 96, 112, 128, 144, 160];
const RATES_V1 = [44100, 48000, 32000];

/** Frame whose header starts at `offset`, or null when no Layer III header stands there. */
export function readMpegFrame(bytes: Uint8Array, offset: number): MpegFrame | null {
	if (offset + 4 > bytes.length) return null;
	const b1 = bytes[offset + 1];
	const b2 = bytes[offset + 2];
	if (bytes[offset] !== 0xff || (b1 & 0xe0) !== 0xe0) return null;
	const version = (b1 >> 3) & 3; // 0: 2.5, 2: 2, 3: 1
	const layer = (b1 >> 1) & 3; // 1: Layer III
	const bitrate = b2 >> 4;
	const rate = (b2 >> 2) & 3;
	if (version === 1 || layer !== 1 || bitrate === 0 || bitrate === 15 || rate === 3) return null;
	const first = version === 3;
	const sampleRateHz = RATES_V1[rate] / (first ? 1 : version === 2 ? 2 : 4);
	const samples = first ? 1152 : 576;
	const kbps = (first ? KBPS_V1 : KBPS_V2)[bitrate];
	const padding = (b2 >> 1) & 1;
	return {
		bytes: Math.floor((samples / 8) * ((kbps * 1000) / sampleRateHz)) + padding,
		samples,
		sampleRateHz,
		channels: bytes[offset + 3] >> 6 === 3 ? 1 : 2
	};
}

/** Frame at `offset` followed by a second one of the same rate, else null: two headers in step are no accident. */
export function firstMpegFrame(bytes: Uint8Array, offset: number): MpegFrame | null {
	const first = readMpegFrame(bytes, offset);
	if (!first) return null;
	const second = readMpegFrame(bytes, offset + first.bytes);
	return second && second.sampleRateHz === first.sampleRateHz ? first : null;
}

export interface MpegStream {
	/** offset of the first frame */
	start: number;
	/** offset after the last whole frame */
	end: number;
	samples: number;
	sampleRateHz: number;
	channels: 1 | 2;
	/** false when something that is neither a frame nor a known trailer follows, or a frame is cut short */
	whole: boolean;
}

/** True when what follows the frames is a tag (ID3v1, APE, Lyrics3) or zero padding, not lost sound. */
function isTrailer(bytes: Uint8Array, offset: number): boolean {
	const head = String.fromCharCode(...bytes.subarray(offset, offset + 11));
	if (/^(TAG|APETAGEX|LYRICSBEGIN|ID3)/.test(head)) return true;
	for (let i = offset; i < bytes.length; i++) if (bytes[i] !== 0) return false;
	return true;
}

/**
 * Walks the frames from just after an ID3v2 tag (some writers pad it with zeros).
 * @returns null when no two frames in step are found at the start
 */
export function walkMpegFrames(bytes: Uint8Array, tagLength: number): MpegStream | null {
	let start = tagLength;
	while (start < bytes.length && bytes[start] === 0) start++;
	const first = firstMpegFrame(bytes, start);
	if (!first) return null;
	let offset = start;
	let samples = 0;
	let whole = true;
	while (offset < bytes.length) {
		const frame = readMpegFrame(bytes, offset);
		if (!frame || frame.sampleRateHz !== first.sampleRateHz) {
			whole = isTrailer(bytes, offset);
			break;
		}
		if (offset + frame.bytes > bytes.length) {
			whole = false;
			break;
		}
		offset += frame.bytes;
		samples += frame.samples;
	}
	const { sampleRateHz, channels } = first;
	return { start, end: offset, samples, sampleRateHz, channels, whole };
}
