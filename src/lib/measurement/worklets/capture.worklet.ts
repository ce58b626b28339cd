import { CaptureRing } from './capture-ring';
import {
	BLOCK_COUNT,
	BLOCK_FRAMES,
	CAPTURE_PROCESSOR,
	type CaptureMessage
} from './capture-messages';

// The audio thread's globals, which the DOM's types do not know.
declare class AudioWorkletProcessor {
	readonly port: MessagePort;
}
declare function registerProcessor(name: string, processor: typeof AudioWorkletProcessor): void;

/** Passes the microphone's first channel on in blocks; all work is done in CaptureRing. */
class CaptureProcessor extends AudioWorkletProcessor {
	private readonly ring = new CaptureRing(BLOCK_FRAMES, BLOCK_COUNT);
	private readonly message: CaptureMessage = { block: null, droppedFrames: 0 };
	private readonly transfer: ArrayBuffer[] = [];
	private stopped = false;

	constructor() {
		super();
		this.port.onmessage = (event: MessageEvent<Float32Array<ArrayBuffer> | 'stop'>) => {
			if (event.data === 'stop') this.stopped = true;
			else this.ring.giveBack(event.data);
		};
	}

	process(inputs: Float32Array[][]): boolean {
		const channel = inputs[0][0];
		if (channel !== undefined) {
			const block = this.ring.write(channel);
			if (block !== null) {
				this.message.block = block;
				this.message.droppedFrames = this.ring.droppedFrames;
				this.transfer[0] = block.buffer;
				this.port.postMessage(this.message, this.transfer);
			}
		}
		return !this.stopped;
	}
}

registerProcessor(CAPTURE_PROCESSOR, CaptureProcessor);
