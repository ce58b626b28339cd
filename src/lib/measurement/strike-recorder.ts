import { StrikeDetector } from './strike-detector';

/** The first tenth of a second of a stream holds the microphone's own switching on. */
const SKIP_SECONDS = 0.1;
/** Kept from before the strike, so that the meter sees the room and finds the onset itself. */
export const LEAD_SECONDS = 0.25;

/**
 * A busy computer fills what it missed with exact zeros, 10 ms or so. A tone passes through zero but
 * never stays there; a run this long inside one that is louder than this is a hole.
 */
const HOLE_SAMPLES = 96;
const HOLE_LEAST_PEAK = 0.001;

/** `quiet-first`: learning the room; `waiting`: for a strike; `ringing`: recording; `done`. */
export type RecorderState = 'quiet-first' | 'waiting' | 'ringing' | 'done';

/** A strike with a little of the room before it. */
export interface StrikeClip {
	samples: Float32Array<ArrayBuffer>;
	sampleRateHz: number;
	/** where the strike begins in `samples` */
	strikeSample: number;
	/** strikes that were begun and superseded by a newer one before the time was up */
	restarts: number;
}

/**
 * Waits for a strike in a stream of blocks and keeps the sound from shortly before it until
 * `seconds` after it. A new strike while one rings starts the time again: the last one counts.
 * Memory is taken once, in the constructor.
 */
export class StrikeRecorder {
	state: RecorderState = 'quiet-first';

	private readonly detector: StrikeDetector;
	private readonly lead: number;
	private readonly wanted: number;
	/** a ring that always holds the newest `lead + wanted` samples, plus a block of slack */
	private readonly ring: Float32Array;
	private received = 0;
	private skip: number;
	private strikeAt = -1;
	private restarts = 0;
	private zeros = 0;
	/** largest magnitude lately, sinking by half in about 10 ms */
	private peak = 0;

	/** Strikes given up because a piece of the sound was missing. */
	holes = 0;

	/** @param seconds time kept from the strike on, 1 to 8 */
	constructor(
		private readonly sampleRateHz: number,
		seconds: number
	) {
		this.detector = new StrikeDetector(sampleRateHz);
		this.lead = Math.round(LEAD_SECONDS * sampleRateHz);
		this.wanted = Math.round(seconds * sampleRateHz);
		this.skip = Math.round(SKIP_SECONDS * sampleRateHz);
		this.ring = new Float32Array(this.lead + this.wanted + 2 * sampleRateHz);
	}

	/** Level of the room in dB re full scale. */
	get floorDb(): number {
		return this.detector.floorDb;
	}

	/** Seconds of sound taken so far. */
	get secondsHeard(): number {
		return this.received / this.sampleRateHz;
	}

	/** Takes the next samples of the stream; ignored once done. */
	add(block: Float32Array): RecorderState {
		if (this.state === 'done') return this.state;
		const skipped = Math.min(this.skip, block.length);
		this.skip -= skipped;
		const samples = skipped > 0 ? block.subarray(skipped) : block;
		let hole = false;
		for (let i = 0; i < samples.length; i++) {
			this.ring[(this.received + i) % this.ring.length] = samples[i];
			hole = this.isHole(samples[i]) || hole;
		}
		this.received += samples.length;
		this.detector.add(samples, (index) => this.struck(index));
		if (hole) {
			this.detector.lookAway();
			if (this.state === 'ringing') this.giveUp();
		}
		if (this.state === 'quiet-first' && this.received > 0.4 * this.sampleRateHz) {
			this.state = 'waiting';
		}
		if (this.strikeAt >= 0 && this.received >= this.strikeAt + this.wanted) this.state = 'done';
		return this.state;
	}

	/** The recording; null until `done`. */
	clip(): StrikeClip | null {
		if (this.state !== 'done') return null;
		const from = Math.max(0, this.strikeAt - this.lead);
		const samples = new Float32Array(this.strikeAt + this.wanted - from);
		for (let i = 0; i < samples.length; i++) samples[i] = this.ring[(from + i) % this.ring.length];
		return {
			samples,
			sampleRateHz: this.sampleRateHz,
			strikeSample: this.strikeAt - from,
			restarts: this.restarts
		};
	}

	private isHole(x: number): boolean {
		if (x !== 0) {
			this.zeros = 0;
			this.peak = Math.max(Math.abs(x), 0.9985 * this.peak);
			return false;
		}
		return ++this.zeros === HOLE_SAMPLES && this.peak > HOLE_LEAST_PEAK;
	}

	/** Back to waiting for another strike. */
	private giveUp(): void {
		this.holes++;
		this.strikeAt = -1;
		this.restarts = 0;
		this.state = 'waiting';
	}

	private struck(index: number): void {
		if (this.strikeAt >= 0) {
			// A strike in the same block as the end of the time comes too late to count.
			if (index >= this.strikeAt + this.wanted) return;
			this.restarts++;
		}
		this.strikeAt = index;
		this.state = 'ringing';
	}
}
