import type { PianoSpec } from '../acoustics/piano-model';

/** One string of a voice heard in two polarisations a little apart: the string alone beats. */
export interface FalseBeat {
	/** Index of the string in `stringsF1Hz`. */
	string: number;
	/** Distance of the second polarisation from the first, in cents (about ±0.2..3). */
	cents: number;
	/** Amplitude of the second polarisation relative to the first, 0..1. */
	depth: number;
}

/** Makes one partial stand out from the others, for listening practice. */
export interface BringForward {
	/** Frequency of the partial to bring forward, in hertz; the nearest partial is taken. */
	frequencyHz: number;
	/** How far the other partials are lowered against it, in dB (0..40). */
	gainDb: number;
}

/** A note to be struck: one to three strings of one key on one piano. */
export interface VoiceSpec {
	/** Name of the voice; striking the same name again re-excites the sounding strings. */
	id: string;
	piano: PianoSpec;
	midi: number;
	/** Force of the blow, 0..1. */
	velocity: number;
	/** First partial of each sounding string when heard alone, in hertz (1 to 3 strings). */
	stringsF1Hz: readonly number[];
	/** False: each string's partial is one damped sinusoid. Default true. */
	coupling?: boolean;
	/** Strings under the mute, by index; they neither sound nor load the bridge. */
	muted?: readonly boolean[];
	bringForward?: BringForward;
	falseBeat?: FalseBeat;
}

/** The sound engine of the browser. All times are seconds of the audio clock. */
export interface ToneEngine {
	readonly sampleRateHz: number;
	/** Delay from the audio graph to the ear as the browser states it, in seconds; 0 when unknown. */
	readonly outputLatencySeconds: number;
	/** Delay of the audio graph itself, in seconds. */
	readonly baseLatencySeconds: number;
	/** Strikes a note; it sounds within one render quantum after the message arrives. */
	strike(voice: VoiceSpec): void;
	/** Strikes a tuning fork. */
	strikeFork(id: string, hz: number, velocity: number): void;
	/** Moves one string's first partial; phase stays continuous, glide of 20 ms. */
	retune(voiceId: string, stringIndex: number, f1Hz: number): void;
	/** Puts the mute on a string or takes it off. */
	mute(voiceId: string, stringIndex: number, muted: boolean): void;
	/** Lets the damper fall on a voice. */
	damp(voiceId: string): void;
	/** Silences everything within a few hundredths of a second. */
	stopAll(): void;
	/** Playback level, 0..1 linear; values above the cap are held at it. */
	setLevel(linear: number): void;
	/** Plays a finished sound (mono, ±1); resolves when it has ended or was stopped. */
	playSamples(samples: Float32Array, sampleRateHz: number): Playback;
	/** A soft sine at a coincident partial's pitch, for the help key. */
	playPartial(hz: number, seconds: number): void;
	/** Audio clock, in seconds. */
	now(): number;
	/**
	 * Starts the audio clock (call it from a gesture) and checks that it advances.
	 * Rejects with `FrozenClockError` when it does not.
	 */
	resume(): Promise<void>;
	close(): Promise<void>;
}

/** A finished sound being played. */
export interface Playback {
	/** Audio time at which the sound starts, in seconds. */
	readonly startsAt: number;
	/** Resolves when the sound has ended or was stopped. */
	readonly ended: Promise<void>;
	stop(): void;
}
