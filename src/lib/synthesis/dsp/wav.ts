/** Sample format of a WAV file. */
export type WavFormat = 'float32' | 'int16';

/**
 * A mono WAV file (RIFF WAVE; IEEE float with its `fact` chunk, or 16-bit PCM).
 * @param samples −1..1; for 16 bits values outside are held at the ends
 * @param sampleRateHz whole number, 1 upwards
 */
export function encodeWav(
	samples: Float32Array,
	sampleRateHz: number,
	format: WavFormat = 'float32'
): Uint8Array<ArrayBuffer> {
	const float = format === 'float32';
	const bytesPerSample = float ? 4 : 2;
	const dataBytes = samples.length * bytesPerSample;
	// Formats other than PCM carry an extension size in `fmt ` and a `fact` chunk.
	const headBytes = float ? 58 : 44;
	const bytes = new Uint8Array(headBytes + dataBytes);
	const view = new DataView(bytes.buffer);
	const text = (at: number, word: string) => {
		for (let i = 0; i < word.length; i += 1) bytes[at + i] = word.charCodeAt(i);
	};
	text(0, 'RIFF');
	view.setUint32(4, headBytes - 8 + dataBytes, true);
	text(8, 'WAVEfmt ');
	view.setUint32(16, float ? 18 : 16, true);
	view.setUint16(20, float ? 3 : 1, true);
	view.setUint16(22, 1, true);
	view.setUint32(24, sampleRateHz, true);
	view.setUint32(28, sampleRateHz * bytesPerSample, true);
	view.setUint16(32, bytesPerSample, true);
	view.setUint16(34, 8 * bytesPerSample, true);
	if (float) {
		text(38, 'fact');
		view.setUint32(42, 4, true);
		view.setUint32(46, samples.length, true);
	}
	text(headBytes - 8, 'data');
	view.setUint32(headBytes - 4, dataBytes, true);
	for (let t = 0; t < samples.length; t += 1) {
		if (float) view.setFloat32(headBytes + 4 * t, samples[t], true);
		else {
			const held = Math.max(-1, Math.min(1, samples[t]));
			view.setInt16(headBytes + 2 * t, Math.round(32767 * held), true);
		}
	}
	return bytes;
}
