/** What an AudioWorkletGlobalScope offers (Web Audio API 1.1, section 1.32); TypeScript's DOM library lacks it. */
interface AudioWorkletProcessor {
	readonly port: MessagePort;
}

declare const AudioWorkletProcessor: {
	prototype: AudioWorkletProcessor;
	new (): AudioWorkletProcessor;
};

declare function registerProcessor(
	name: string,
	processor: new (options?: AudioWorkletNodeOptions) => AudioWorkletProcessor & {
		process(
			inputs: Float32Array[][],
			outputs: Float32Array[][],
			parameters: Record<string, Float32Array>
		): boolean;
	}
): void;

declare const sampleRate: number;
declare const currentFrame: number;
declare const currentTime: number;
