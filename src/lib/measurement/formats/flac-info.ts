/** What a native FLAC stream says of itself (RFC 9639 §8.2). */
export interface FlacInfo {
	sampleRateHz: number;
	channels: number;
	/** samples per channel, 0 when unknown */
	samples: number;
}

/** Reads STREAMINFO, which must be the first metadata block; null when it is not there whole. */
export function readFlacInfo(bytes: Uint8Array, offset: number): FlacInfo | null {
	const block = offset + 4;
	if (block + 38 > bytes.length || (bytes[block] & 0x7f) !== 0) return null;
	const b = (i: number) => bytes[block + 4 + i];
	return {
		sampleRateHz: (b(10) << 12) | (b(11) << 4) | (b(12) >> 4),
		channels: ((b(12) >> 1) & 7) + 1,
		samples: (b(13) & 15) * 2 ** 32 + b(14) * 2 ** 24 + ((b(15) << 16) | (b(16) << 8) | b(17))
	};
}
