import { ToneBank } from '../dsp/tone-bank';
import { STRINGS_PROCESSOR, type StringsMessage } from './messages';

/** Thin shell: messages in, samples out; all sound is made by the tone bank. */
class StringsProcessor extends AudioWorkletProcessor {
	private readonly bank = new ToneBank(sampleRate);
	private open = true;

	constructor() {
		super();
		this.port.onmessage = (event: MessageEvent<StringsMessage>) => this.receive(event.data);
	}

	private receive(message: StringsMessage): void {
		switch (message.type) {
			case 'strike':
				return this.bank.strike(message.slot, message.plan);
			case 'retune':
				return this.bank.retune(message.slot, message.string, message.f1Hz);
			case 'mute':
				return this.bank.mute(message.slot, message.string, message.muted);
			case 'damp':
				return this.bank.damp(message.slot);
			case 'stop':
				return this.bank.stopAll();
			case 'level':
				return this.bank.setLevel(message.linear);
			case 'close':
				this.open = false;
		}
	}

	/** Fills the first output; other channels get the same samples. Allocates nothing. */
	process(_inputs: Float32Array[][], outputs: Float32Array[][]): boolean {
		const channels = outputs[0];
		this.bank.process(channels[0]);
		for (let c = 1; c < channels.length; c += 1) channels[c].set(channels[0]);
		return this.open;
	}
}

registerProcessor(STRINGS_PROCESSOR, StringsProcessor);
