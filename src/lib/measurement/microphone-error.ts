/** Why there is no sound from the microphone. */
export type MicrophoneFault =
	| 'insecure'
	| 'unsupported'
	| 'denied'
	| 'no-device'
	| 'busy'
	| 'frozen'
	| 'ended'
	| 'gap'
	| 'failed';

/** What stands on the page: a finding, what it means, and steps to take in order. */
export interface MicrophoneFaultText {
	title: string;
	text: string;
	steps: readonly string[];
}

const NOTHING = 'Nothing was recorded.';

const TEXTS: Record<MicrophoneFault, MicrophoneFaultText> = {
	insecure: {
		title: 'This address may not use the microphone.',
		text: `${NOTHING} Browsers open the microphone only over https, or on the computer that runs Ebbtone itself.`,
		steps: [
			'Open Ebbtone with https:// in front of its address.',
			'Or record the strike with another program and measure the file here.'
		]
	},
	unsupported: {
		title: 'This browser cannot listen.',
		text: `${NOTHING} It lacks the means to pass the microphone’s sound on unchanged.`,
		steps: [
			'Open this page in a current browser.',
			'Or record the strike with another program and measure the file here.'
		]
	},
	denied: {
		title: 'The browser refuses the microphone.',
		text: `${NOTHING} The practice drills work without it, and a recorded file can be measured here.`,
		steps: [
			'Press the sign left of the address.',
			'Set Microphone to Allow, for this site.',
			'Come back and press Ask again. If it is still refused, look in the system’s own privacy settings.'
		]
	},
	'no-device': {
		title: 'No microphone was found.',
		text: `${NOTHING} The browser sees no device to listen with.`,
		steps: [
			'Plug a microphone in, or switch it on.',
			'Look in the system’s sound settings whether it is listed.',
			'Come back and press Ask again.'
		]
	},
	busy: {
		title: 'The microphone cannot be opened.',
		text: `${NOTHING} Another program may be using it, or the system refuses it.`,
		steps: ['Close other programs that listen, calls above all.', 'Press Ask again.']
	},
	frozen: {
		title: 'The browser’s sound clock stands still.',
		text: `${NOTHING} The microphone is open, but no sound arrives from it.`,
		steps: [
			'Press Ask again: the sound is then set up anew.',
			'If that does not help, reload the page, or plug the microphone in again.'
		]
	},
	ended: {
		title: 'The microphone went away.',
		text: 'It was unplugged, switched off or taken back by the system. What it had heard is not used.',
		steps: ['Connect it again.', 'Press Ask again.']
	},
	gap: {
		title: 'A piece of the sound is missing.',
		text: 'This computer was too busy to take every sample, and a gap would falsify the beats. Nothing is measured.',
		steps: ['Close other programs and tabs.', 'Press Ask again and strike once more.']
	},
	failed: {
		title: 'The microphone could not be opened.',
		text: `${NOTHING} The browser gives no reason.`,
		steps: [
			'Press Ask again.',
			'If it fails again, try another browser or measure a recorded file.'
		]
	}
};

/** Thrown when the microphone cannot be used; `text` is for the person. */
export class MicrophoneError extends Error {
	readonly fault: MicrophoneFault;

	constructor(fault: MicrophoneFault) {
		super(TEXTS[fault].title);
		this.name = 'MicrophoneError';
		this.fault = fault;
	}

	get text(): MicrophoneFaultText {
		return TEXTS[this.fault];
	}
}

/** Fault behind what getUserMedia throws (names: W3C Media Capture and Streams, getUserMedia). */
export function faultFromException(error: unknown): MicrophoneFault {
	const name = error instanceof Error || error instanceof DOMException ? error.name : '';
	switch (name) {
		case 'NotAllowedError':
		case 'SecurityError':
			return 'denied';
		case 'NotFoundError':
		case 'OverconstrainedError':
			return 'no-device';
		case 'NotReadableError':
		case 'AbortError':
			return 'busy';
		default:
			return 'failed';
	}
}
