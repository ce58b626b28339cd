/** Why a sound file was refused; the message is the sentence for the reader. */
export type AudioRefusal =
	'too-large' | 'too-long' | 'unknown-format' | 'unsupported' | 'sample-rate' | 'damaged' | 'empty';

/** Thrown for a file that is not measured. `message` is one sentence a student can act on. */
export class AudioRefusedError extends Error {
	readonly refusal: AudioRefusal;

	constructor(refusal: AudioRefusal, message: string) {
		super(message);
		this.name = 'AudioRefusedError';
		this.refusal = refusal;
	}
}

/** Largest accepted file in bytes (20 MB, decimal). */
export const MAX_FILE_BYTES = 20_000_000;
/** Longest accepted sound in seconds. */
export const MAX_SECONDS = 30;
/** Lossy encoders pad the end by up to two frames; a clip cut to exactly 30 s must still pass. */
export const PADDING_SECONDS = 0.06;
/** Accepted sample rates in hertz. */
export const MIN_SAMPLE_RATE_HZ = 8_000;
export const MAX_SAMPLE_RATE_HZ = 192_000;
/** Most channels mixed down to one. */
export const MAX_CHANNELS = 8;

const READABLE = 'Ebbtone reads WAV, FLAC, Ogg and MP3.';

export function refuseTooLarge(bytes: number): AudioRefusedError {
	const megabytes = (Math.ceil(bytes / 100_000) / 10).toFixed(1);
	return new AudioRefusedError(
		'too-large',
		`This file is ${megabytes} MB and the limit is ${MAX_FILE_BYTES / 1e6} MB: cut it to one strike and try again.`
	);
}

export function refuseTooLong(): AudioRefusedError {
	return new AudioRefusedError(
		'too-long',
		`This sound is longer than ${MAX_SECONDS} seconds: cut it to one strike and try again.`
	);
}

export function refuseUnknown(): AudioRefusedError {
	return new AudioRefusedError(
		'unknown-format',
		`This is not a sound file that can be read here. ${READABLE}`
	);
}

/** @param what the kind of file with its article, for instance "an MP4 file" */
export function refuseUnsupported(what: string): AudioRefusedError {
	return new AudioRefusedError('unsupported', `This is ${what}. ${READABLE}`);
}

export function refuseSampleRate(sampleRateHz: number): AudioRefusedError {
	return new AudioRefusedError(
		'sample-rate',
		`This file has ${sampleRateHz} samples per second; between ${MIN_SAMPLE_RATE_HZ} and ${MAX_SAMPLE_RATE_HZ} can be measured.`
	);
}

/** @param format name of the format, @param how what is wrong with it, as a clause */
export function refuseDamaged(format: string, how: string): AudioRefusedError {
	return new AudioRefusedError(
		'damaged',
		`This ${format} file is damaged: ${how}. Export or record it again.`
	);
}

export function refuseEmpty(): AudioRefusedError {
	return new AudioRefusedError('empty', 'This file holds no sound.');
}

/**
 * Refuses what is outside the limits before it is decoded.
 * @param samplesPerChannel 0 when the file does not say how long it is
 */
export function checkLimits(sampleRateHz: number, channels: number, samplesPerChannel: number) {
	if (!(sampleRateHz >= MIN_SAMPLE_RATE_HZ && sampleRateHz <= MAX_SAMPLE_RATE_HZ)) {
		throw refuseSampleRate(sampleRateHz);
	}
	if (channels > MAX_CHANNELS) {
		throw refuseUnsupported(`a file with ${channels} channels, more than ${MAX_CHANNELS}`);
	}
	if (samplesPerChannel > (MAX_SECONDS + PADDING_SECONDS) * sampleRateHz) throw refuseTooLong();
}
