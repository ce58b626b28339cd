/** What kind of device a microphone calls itself; its own name is never kept. */
export type MicrophoneLabelClass = 'built-in' | 'usb' | 'headset' | 'virtual' | 'other' | 'unnamed';

/** What the browser says it did with the microphone; null where it does not say. */
export interface MicrophoneFacts {
	/** Rate at which the sound was captured, in hertz. */
	sampleRateHz: number;
	echoCancellation: boolean | null;
	noiseSuppression: boolean | null;
	autoGainControl: boolean | null;
	label: MicrophoneLabelClass;
	/** True when the browser kept any of the three on: then nothing may be judged. */
	processed: boolean;
}

/** The three kinds of processing that are asked to be off, in the words of the page. */
export const PROCESSING = [
	['echoCancellation', 'echo cancellation'],
	['noiseSuppression', 'noise suppression'],
	['autoGainControl', 'automatic gain']
] as const;

/** Constraints for an untouched single channel. */
export const CONSTRAINTS: MediaTrackConstraints = {
	echoCancellation: false,
	noiseSuppression: false,
	autoGainControl: false,
	channelCount: 1
};

/** Class of a device by the words in its label. */
export function labelClass(label: string): MicrophoneLabelClass {
	const words = label.toLowerCase();
	if (words === '') return 'unnamed';
	if (/virtual|loopback|monitor of|fake|stereo mix|cable output/.test(words)) return 'virtual';
	if (/headset|headphone|earbud|hands-?free|bluetooth/.test(words)) return 'headset';
	if (/usb|interface/.test(words)) return 'usb';
	if (/built-?in|internal|array|integrated/.test(words)) return 'built-in';
	return 'other';
}

function onOffUnknown(value: unknown): boolean | null {
	// Newer browsers answer echoCancellation with the name of the kind in use.
	if (typeof value === 'string') return value !== 'none';
	return typeof value === 'boolean' ? value : null;
}

/**
 * Facts of an opened track.
 * @param settings as the browser reads them back; only what it says on counts as processed
 */
export function factsFromSettings(
	settings: MediaTrackSettings,
	label: string,
	sampleRateHz: number
): MicrophoneFacts {
	const echoCancellation = onOffUnknown(settings.echoCancellation);
	const noiseSuppression = onOffUnknown(settings.noiseSuppression);
	const autoGainControl = onOffUnknown(settings.autoGainControl);
	return {
		sampleRateHz,
		echoCancellation,
		noiseSuppression,
		autoGainControl,
		label: labelClass(label),
		processed: [echoCancellation, noiseSuppression, autoGainControl].includes(true)
	};
}

/** Names of the kinds of processing for which a fact has this value. */
export function processingThatIs(facts: MicrophoneFacts, value: boolean | null): string[] {
	return PROCESSING.filter(([key]) => facts[key] === value).map(([, words]) => words);
}
