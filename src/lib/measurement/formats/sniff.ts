import { firstMpegFrame } from './mpeg-frames';

/** What the first bytes say a file is. `other` names a recognised format that is not read. */
export type SniffedFormat =
	| { kind: 'wav' | 'flac' | 'ogg-vorbis' | 'ogg-opus' | 'ogg-flac' | 'mp3' }
	| { kind: 'other'; what: string }
	| { kind: 'unknown' };

/** True when `bytes` holds the ASCII `text` at `offset`. */
export function hasText(bytes: Uint8Array, offset: number, text: string): boolean {
	if (offset + text.length > bytes.length) return false;
	for (let i = 0; i < text.length; i++) {
		if (bytes[offset + i] !== text.charCodeAt(i)) return false;
	}
	return true;
}

/** Length of a leading ID3v2 tag in bytes, 0 when there is none (ID3v2.4 structure, §3.1). */
export function id3v2Length(bytes: Uint8Array): number {
	if (!hasText(bytes, 0, 'ID3') || bytes.length < 10) return 0;
	const size = (bytes[6] << 21) | (bytes[7] << 14) | (bytes[8] << 7) | bytes[9];
	const footer = bytes[5] & 0x10 ? 10 : 0;
	return Math.min(bytes.length, 10 + size + footer);
}

/** Codec of an Ogg stream by its first packet, which starts after the segment table. */
function sniffOgg(bytes: Uint8Array): SniffedFormat {
	const packet = 27 + (bytes[26] ?? 0);
	if (hasText(bytes, packet, '\x01vorbis')) return { kind: 'ogg-vorbis' };
	if (hasText(bytes, packet, 'OpusHead')) return { kind: 'ogg-opus' };
	if (hasText(bytes, packet, '\x7fFLAC')) return { kind: 'ogg-flac' };
	if (hasText(bytes, packet, 'Speex   ')) return { kind: 'other', what: 'an Ogg Speex file' };
	return { kind: 'other', what: 'an Ogg file without Vorbis, Opus or FLAC sound first' };
}

function sniffOther(bytes: Uint8Array): SniffedFormat {
	if (hasText(bytes, 4, 'ftyp')) return { kind: 'other', what: 'an MP4 or M4A file' };
	if (hasText(bytes, 0, 'FORM')) return { kind: 'other', what: 'an AIFF file' };
	if (hasText(bytes, 0, 'RF64')) return { kind: 'other', what: 'an RF64 file' };
	if (hasText(bytes, 0, 'RIFX')) return { kind: 'other', what: 'a big-endian WAV file' };
	if (hasText(bytes, 0, 'RIFF')) return { kind: 'other', what: 'a RIFF file but not WAV' };
	if (hasText(bytes, 0, 'MThd'))
		return { kind: 'other', what: 'a MIDI file, which holds no sound' };
	if (hasText(bytes, 0, '\x1aE\xdf\xa3')) return { kind: 'other', what: 'a WebM or Matroska file' };
	if (hasText(bytes, 0, '0&\xb2u')) return { kind: 'other', what: 'an ASF (WMA) file' };
	if (bytes[0] === 0xff && (bytes[1] & 0xf6) === 0xf0) {
		return { kind: 'other', what: 'an AAC file' };
	}
	return { kind: 'unknown' };
}

/**
 * Tells a sound file's format by its content; the name and its extension play no part.
 * @returns `unknown` when nothing fits
 */
export function sniffFormat(bytes: Uint8Array): SniffedFormat {
	if (hasText(bytes, 0, 'RIFF') && hasText(bytes, 8, 'WAVE')) return { kind: 'wav' };
	if (hasText(bytes, 0, 'OggS')) return sniffOgg(bytes);
	const tag = id3v2Length(bytes);
	if (hasText(bytes, tag, 'fLaC')) return { kind: 'flac' };
	const other = sniffOther(bytes);
	if (other.kind !== 'unknown') return other;
	if (tag > 0 || firstMpegFrame(bytes, 0) !== null) return { kind: 'mp3' };
	return other;
}
