import { CoupledVoice } from './coupled-voice';
import { limit } from './limiter';
import type { VoicePlan } from './voice-plan';

/** Voices that can sound at once. */
export const BANK_VOICES = 16;
/** Samples worked on at a time; a render quantum. */
const CHUNK = 128;
/** A voice that is replaced leaves its last value to fade in this time, s. */
const HAND_OVER_SECONDS = 0.003;

/**
 * Several voices, mixed, faded in level and softly limited. The bank of the browser's audio thread
 * and of offline rendering. Allocates nothing after construction.
 */
export class ToneBank {
	private readonly voices: readonly CoupledVoice[];
	private readonly mix = new Float64Array(CHUNK);
	private readonly tailDecay: number;
	private readonly levelStep: number;
	private tail = 0;
	private level = 1;
	private levelTarget = 1;

	constructor(sampleRateHz: number, voices = BANK_VOICES) {
		this.voices = Array.from({ length: voices }, () => new CoupledVoice(sampleRateHz));
		this.tailDecay = Math.exp(-1 / (HAND_OVER_SECONDS * sampleRateHz));
		this.levelStep = 1 / (0.02 * sampleRateHz);
	}

	/** Number of voices that sound. */
	get activeVoices(): number {
		let count = 0;
		for (const voice of this.voices) if (voice.active) count += 1;
		return count;
	}

	/** Number of partials, of all voices, that have not died away. */
	get soundingPartials(): number {
		let count = 0;
		for (const voice of this.voices) count += voice.soundingPartials;
		return count;
	}

	/** Strikes voice `slot`; numbers outside the bank are ignored. */
	strike(slot: number, plan: VoicePlan): void {
		const voice = this.voices[slot];
		if (!voice) return;
		if (voice.active && !voice.continues(plan)) this.tail += voice.nextSample();
		voice.strike(plan);
	}

	retune(slot: number, stringIndex: number, f1Hz: number): void {
		this.voices[slot]?.retune(stringIndex, f1Hz);
	}

	mute(slot: number, stringIndex: number, muted: boolean): void {
		this.voices[slot]?.mute(stringIndex, muted);
	}

	damp(slot: number): void {
		this.voices[slot]?.damp();
	}

	stopAll(): void {
		for (const voice of this.voices) voice.stop();
	}

	/** Level of the mix before the limiter, 0..1; reached in at most 20 ms. */
	setLevel(linear: number): void {
		this.levelTarget = linear > 0 ? Math.min(1, linear) : 0;
	}

	/** Writes the next `out.length` samples. */
	process(out: Float32Array): void {
		for (let at = 0; at < out.length; at += CHUNK) {
			this.chunk(out, at, Math.min(CHUNK, out.length - at));
		}
	}

	/** Writes `count` samples from `from`. */
	processRange(out: Float32Array, from: number, count: number): void {
		for (let at = 0; at < count; at += CHUNK) {
			this.chunk(out, from + at, Math.min(CHUNK, count - at));
		}
	}

	private chunk(out: Float32Array, from: number, count: number): void {
		const { mix, voices } = this;
		mix.fill(0, 0, count);
		for (let v = 0; v < voices.length; v += 1) voices[v].process(mix, 0, count);
		if (Math.abs(this.tail) > 1e-9) {
			for (let t = 0; t < count; t += 1) {
				mix[t] += this.tail;
				this.tail *= this.tailDecay;
			}
		} else this.tail = 0;
		for (let t = 0; t < count; t += 1) {
			if (this.level !== this.levelTarget) {
				const step = this.levelTarget - this.level;
				this.level += Math.max(-this.levelStep, Math.min(this.levelStep, step));
			}
			out[from + t] = limit(this.level * mix[t]);
		}
	}
}
