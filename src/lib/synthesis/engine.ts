import { BANK_VOICES } from './dsp/tone-bank';
import { planFork, planVoice, type VoicePlan } from './dsp/voice-plan';
import { FrozenClockError, waitForClock } from './engine-clock';
import type { Playback, ToneEngine, VoiceSpec } from './types';
import { VoiceSlots } from './voice-slots';
import { STRINGS_PROCESSOR, type StringsMessage } from './worklets/messages';
import workletUrl from './worklets/strings.worklet.ts?worker&url';

export { FrozenClockError };

/** Level at the start, linear: comfortable on most devices. */
export const DEFAULT_LEVEL = 0.5;
/** No setting plays louder than this, whatever the page asks for. */
export const LEVEL_CAP = 0.9;
/** Level of the sine that names a partial's pitch: soft against a struck note. */
const PARTIAL_LEVEL = 0.05;
/** Fades of the help tone and of replayed sounds, s. */
const FADE_SECONDS = 0.02;

const wait = (ms: number) => new Promise<void>((done) => setTimeout(done, ms));

class BrowserToneEngine implements ToneEngine {
	private readonly slots = new VoiceSlots(BANK_VOICES);
	private readonly playing = new Set<() => void>();

	constructor(
		private readonly context: AudioContext,
		private readonly strings: AudioWorkletNode,
		private readonly master: GainNode
	) {}

	get sampleRateHz(): number {
		return this.context.sampleRate;
	}

	get outputLatencySeconds(): number {
		return this.context.outputLatency || 0;
	}

	get baseLatencySeconds(): number {
		return this.context.baseLatency || 0;
	}

	now(): number {
		return this.context.currentTime;
	}

	private send(message: StringsMessage): void {
		this.strings.port.postMessage(message);
	}

	private sendStrike(id: string, plan: VoicePlan): void {
		this.send({ type: 'strike', slot: this.slots.take(id), plan });
	}

	strike(voice: VoiceSpec): void {
		this.sendStrike(voice.id, planVoice(voice, this.sampleRateHz));
	}

	strikeFork(id: string, hz: number, velocity: number): void {
		this.sendStrike(id, planFork(hz, velocity, this.sampleRateHz));
	}

	retune(voiceId: string, stringIndex: number, f1Hz: number): void {
		const slot = this.slots.find(voiceId);
		if (slot >= 0) this.send({ type: 'retune', slot, string: stringIndex, f1Hz });
	}

	mute(voiceId: string, stringIndex: number, muted: boolean): void {
		const slot = this.slots.find(voiceId);
		if (slot >= 0) this.send({ type: 'mute', slot, string: stringIndex, muted });
	}

	damp(voiceId: string): void {
		const slot = this.slots.find(voiceId);
		if (slot >= 0) this.send({ type: 'damp', slot });
	}

	stopAll(): void {
		this.send({ type: 'stop' });
		for (const stop of [...this.playing]) stop();
	}

	setLevel(linear: number): void {
		const level = linear > 0 ? Math.min(LEVEL_CAP, linear) : 0;
		this.master.gain.setTargetAtTime(level, this.context.currentTime, 0.01);
	}

	/** Connects a source through a gain of its own, so that it can be faded out. */
	private play(
		source: AudioScheduledSourceNode,
		level: number,
		seconds: number,
		fadeIn: number
	): Playback {
		const gain = this.context.createGain();
		const startsAt = this.context.currentTime + 0.01;
		const endsAt = startsAt + seconds;
		gain.gain.setValueAtTime(0, startsAt);
		gain.gain.linearRampToValueAtTime(level, startsAt + Math.min(fadeIn, seconds / 2));
		gain.gain.setValueAtTime(level, Math.max(startsAt + fadeIn, endsAt - FADE_SECONDS));
		gain.gain.linearRampToValueAtTime(0, endsAt);
		source.connect(gain).connect(this.master);
		const stop = () => {
			const now = this.context.currentTime;
			gain.gain.cancelScheduledValues(now);
			gain.gain.setTargetAtTime(0, now, FADE_SECONDS / 4);
			source.stop(now + 2 * FADE_SECONDS);
		};
		const ended = new Promise<void>((done) => {
			source.onended = () => {
				this.playing.delete(stop);
				gain.disconnect();
				done();
			};
		});
		this.playing.add(stop);
		source.start(startsAt);
		source.stop(endsAt);
		return { startsAt, ended, stop };
	}

	playSamples(samples: Float32Array, sampleRateHz: number): Playback {
		const buffer = this.context.createBuffer(1, Math.max(1, samples.length), sampleRateHz);
		buffer.getChannelData(0).set(samples);
		const source = this.context.createBufferSource();
		source.buffer = buffer;
		// A rendered strike rises smoothly by itself; a longer fade would blunt it.
		return this.play(source, 1, buffer.duration, 0.001);
	}

	playPartial(hz: number, seconds: number): void {
		const oscillator = this.context.createOscillator();
		oscillator.frequency.value = hz;
		this.play(oscillator, PARTIAL_LEVEL, seconds, FADE_SECONDS);
	}

	async resume(): Promise<void> {
		// A context that may not start yet leaves resume() pending for ever: the clock decides.
		void this.context.resume().catch(() => undefined);
		await waitForClock(() => this.context.currentTime, wait);
	}

	async close(): Promise<void> {
		this.send({ type: 'close' });
		if (this.context.state !== 'closed') await this.context.close();
	}
}

/**
 * Makes the sound engine. Import this module dynamically, when the person asks to listen, and call
 * it from that gesture: browsers let sound start only then.
 * Rejects with a plain sentence where the browser has no AudioWorklet (old, or a page that is
 * neither HTTPS nor localhost).
 */
export async function createToneEngine(): Promise<ToneEngine> {
	if (typeof AudioContext === 'undefined') {
		throw new Error('This browser cannot make sound in the way the drills need.');
	}
	const context = new AudioContext({ latencyHint: 'interactive' });
	if (!context.audioWorklet) {
		await context.close();
		throw new Error('Sound needs a secure page: open Ebbtone over HTTPS or on localhost.');
	}
	await context.audioWorklet.addModule(workletUrl);
	const strings = new AudioWorkletNode(context, STRINGS_PROCESSOR, {
		numberOfInputs: 0,
		numberOfOutputs: 1,
		outputChannelCount: [1]
	});
	const master = context.createGain();
	master.gain.value = DEFAULT_LEVEL;
	strings.connect(master).connect(context.destination);
	return new BrowserToneEngine(context, strings, master);
}
