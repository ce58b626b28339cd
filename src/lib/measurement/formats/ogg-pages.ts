import { hasText } from './sniff';

/**
 * Ogg page walk (RFC 3533 §6). The decoders skip pages they cannot use without saying so, and a
 * tone with a gap has the wrong beats, so checksums and page numbers are checked here first.
 */
export interface OggStream {
	/** granule position of the last page; samples for Vorbis and FLAC, 48 kHz samples for Opus */
	lastGranule: number;
	/** null when the pages are in order and their checksums hold, else what is wrong, as a clause */
	fault: string | null;
}

const CRC_TABLE = makeCrcTable();

function makeCrcTable(): Uint32Array {
	const table = new Uint32Array(256);
	for (let i = 0; i < 256; i++) {
		let r = i << 24;
		for (let bit = 0; bit < 8; bit++) r = r & 0x80000000 ? (r << 1) ^ 0x04c11db7 : r << 1;
		table[i] = r >>> 0;
	}
	return table;
}

/** CRC-32 of a page as RFC 3533 defines it: polynomial 04c11db7, the checksum's own bytes taken as zero. */
function pageCrc(page: Uint8Array): number {
	let crc = 0;
	for (let i = 0; i < page.length; i++) {
		const byte = i >= 22 && i < 26 ? 0 : page[i];
		crc = ((crc << 8) ^ CRC_TABLE[((crc >>> 24) ^ byte) & 0xff]) >>> 0;
	}
	return crc;
}

/** Bytes of the page at `offset`, or 0 when none stands there or it is cut short. */
function pageLength(bytes: Uint8Array, offset: number): number {
	if (!hasText(bytes, offset, 'OggS') || offset + 27 > bytes.length) return 0;
	const segments = bytes[offset + 26];
	let length = 27 + segments;
	if (offset + length > bytes.length) return 0;
	for (let i = 0; i < segments; i++) length += bytes[offset + 27 + i];
	return offset + length > bytes.length ? 0 : length;
}

/** Walks all pages of a file that starts with one. Chained or interleaved streams are a fault: one clip, one sound. */
export function walkOggPages(bytes: Uint8Array): OggStream {
	const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
	let offset = 0;
	let sequence = 0;
	let lastGranule = 0;
	let ended = false;
	const serial = bytes.length >= 18 ? view.getUint32(14, true) : 0;
	const broken = (fault: string): OggStream => ({ lastGranule, fault });
	while (offset < bytes.length) {
		const length = pageLength(bytes, offset);
		if (length === 0) return broken('it breaks off or has other data in the middle');
		if (view.getUint32(offset + 14, true) !== serial)
			return broken('it holds more than one stream');
		if (view.getUint32(offset + 18, true) !== sequence) return broken('a part of it is missing');
		const page = bytes.subarray(offset, offset + length);
		if (pageCrc(page) !== view.getUint32(offset + 22, true))
			return broken('a checksum does not hold');
		const granule = Number(view.getBigInt64(offset + 6, true));
		if (granule >= 0) lastGranule = granule;
		ended = (bytes[offset + 5] & 4) !== 0;
		sequence++;
		offset += length;
	}
	return { lastGranule, fault: ended ? null : 'its end is missing' };
}
