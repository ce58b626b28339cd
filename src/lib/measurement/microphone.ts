import { faultFromException, MicrophoneError } from './microphone-error';
import { CONSTRAINTS, factsFromSettings, type MicrophoneFacts } from './microphone-facts';
import { CAPTURE_PROCESSOR, type CaptureMessage } from './worklets/capture-messages';
import captureUrl from './worklets/capture.worklet.ts?worker&url';

export { MicrophoneError } from './microphone-error';
export type { MicrophoneFacts } from './microphone-facts';

/** An open microphone. */
export interface Microphone {
	readonly facts: MicrophoneFacts;
	/** Stops listening, lets the device go and closes the sound clock. Safe to call twice. */
	close(): void;
}

export interface MicrophoneListener {
	/** Mono samples in order, without gaps; the array is used again after the call. */
	onBlock(samples: Float32Array): void;
	/** Called once when the sound stops by itself; the microphone is closed then. */
	onFault(error: MicrophoneError): void;
}

/** No block for this long means that the clock stands (blocks come every 21 ms or so). */
const FROZEN_MS = 1500;
const WATCH_MS = 250;

async function openStream(): Promise<MediaStream> {
	if (typeof window === 'undefined' || !window.isSecureContext)
		throw new MicrophoneError('insecure');
	if (!navigator.mediaDevices?.getUserMedia || typeof AudioWorkletNode === 'undefined') {
		throw new MicrophoneError('unsupported');
	}
	try {
		return await navigator.mediaDevices.getUserMedia({ audio: CONSTRAINTS, video: false });
	} catch (error) {
		throw new MicrophoneError(faultFromException(error));
	}
}

/** A context at the device's own rate, so that nothing is resampled; else at the browser's choice. */
function openContext(deviceRateHz: number | undefined): AudioContext {
	if (deviceRateHz) {
		try {
			return new AudioContext({ sampleRate: deviceRateHz });
		} catch {
			// Rates that the output cannot play are refused by some browsers.
		}
	}
	return new AudioContext();
}

async function connect(context: AudioContext, stream: MediaStream): Promise<AudioWorkletNode> {
	await context.audioWorklet.addModule(captureUrl);
	const source = context.createMediaStreamSource(stream);
	const node = new AudioWorkletNode(context, CAPTURE_PROCESSOR, {
		numberOfInputs: 1,
		numberOfOutputs: 0,
		channelCount: 1,
		channelCountMode: 'explicit'
	});
	source.connect(node);
	// A context made after the permission question may start suspended; the press still counts.
	if (context.state !== 'running') await Promise.race([context.resume(), wait(FROZEN_MS)]);
	return node;
}

const wait = (ms: number) => new Promise<void>((resolve) => setTimeout(resolve, ms));

/** Passes blocks on and gives them back; calls `onGap` when the audio thread had to drop frames. */
function passOn(node: AudioWorkletNode, onBlock: (b: Float32Array) => void, onGap: () => void) {
	node.port.onmessage = ({ data }: MessageEvent<CaptureMessage>) => {
		const { block, droppedFrames } = data;
		if (!block) return;
		if (droppedFrames > 0) return onGap();
		onBlock(block);
		node.port.postMessage(block, [block.buffer]);
	};
}

/**
 * Opens the microphone with all processing asked to be off and streams its sound to `listener`
 * until closed. Call it from a press of a button. Reads the settings back: `facts.processed` says
 * that the browser kept some processing on.
 * @throws MicrophoneError when the page is not secure, the permission is refused, there is no
 *   device, or its clock stands still
 */
export async function openMicrophone(listener: MicrophoneListener): Promise<Microphone> {
	const stream = await openStream();
	const track = stream.getAudioTracks()[0];
	const settings = track.getSettings();
	let context: AudioContext | null = null;
	let node: AudioWorkletNode | null = null;
	const watch: { timer?: ReturnType<typeof setInterval> } = {};
	let closed = false;
	let lastBlockAt = performance.now();

	const close = () => {
		if (closed) return;
		closed = true;
		clearInterval(watch.timer);
		node?.port.postMessage('stop');
		node?.disconnect();
		for (const each of stream.getTracks()) each.stop();
		if (context && context.state !== 'closed') void context.close();
	};
	const fail = (error: MicrophoneError) => {
		if (closed) return;
		close();
		listener.onFault(error);
	};

	try {
		context = openContext(settings.sampleRate);
		node = await connect(context, stream);
	} catch {
		close();
		throw new MicrophoneError('failed');
	}
	passOn(
		node,
		(block) => {
			lastBlockAt = performance.now();
			if (!closed) listener.onBlock(block);
		},
		() => fail(new MicrophoneError('gap'))
	);
	lastBlockAt = performance.now();
	track.addEventListener('ended', () => fail(new MicrophoneError('ended')));
	watch.timer = setInterval(() => {
		// A hidden tab's timers are slowed down, so lateness counts only while the page is seen.
		if (document.visibilityState === 'visible' && performance.now() - lastBlockAt > FROZEN_MS) {
			fail(new MicrophoneError('frozen'));
		}
	}, WATCH_MS);
	return { facts: factsFromSettings(settings, track.label, context.sampleRate), close };
}
