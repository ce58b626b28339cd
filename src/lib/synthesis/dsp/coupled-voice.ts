import { Knock } from './knock';
import { Onset } from './onset';
import { runOne, runThree, runTwo, type CellArrays } from './string-cells';
import { writeCoupling, writeSteps, type StringSituation } from './string-coefficients';
import { MAX_PARTIALS, MAX_STRINGS, type VoicePlan } from './voice-plan';

/** A retuned string reaches its new pitch in this time, s. */
const GLIDE_SECONDS = 0.02;
/** Decay of a voice that is stopped, 1/s: 60 dB in 23 ms. */
const STOP_DECAY_PER_SECOND = 300;
/** Energy (amplitude squared) under which a partial is taken as silent: −160 dB. */
const SILENCE = 1e-16;

/**
 * One note: up to 40 partials of up to three coupled strings, struck, retuned, muted and damped
 * while sounding. Everything is allocated by the constructor; `strike` and `process` allocate
 * nothing.
 */
export class CoupledVoice implements CellArrays, StringSituation {
	readonly stride = MAX_STRINGS;
	readonly stateRe = new Float64Array(MAX_PARTIALS * MAX_STRINGS);
	readonly stateIm = new Float64Array(MAX_PARTIALS * MAX_STRINGS);
	readonly stepRe = new Float64Array(MAX_PARTIALS * MAX_STRINGS);
	readonly stepIm = new Float64Array(MAX_PARTIALS * MAX_STRINGS);
	readonly couplingRe = new Float64Array(MAX_PARTIALS);
	readonly couplingIm = new Float64Array(MAX_PARTIALS);
	readonly f1Hz = new Float64Array(MAX_STRINGS);
	readonly muted = new Uint8Array(MAX_STRINGS);
	readonly coupled = new Uint8Array(MAX_STRINGS);
	extraDecay = 0;
	coupledCount = 0;

	private readonly targetHz = new Float64Array(MAX_STRINGS);
	private readonly glideLeft = new Int32Array(MAX_STRINGS);
	private readonly gain = new Float64Array(MAX_STRINGS);
	private readonly alive = new Uint8Array(MAX_PARTIALS);
	private readonly coupledAt = new Int32Array(MAX_STRINGS);
	private readonly onset: Onset;
	private readonly knock: Knock;
	private readonly glideSamples: number;
	private plan: VoicePlan | null = null;
	private strings = 0;
	private sounding = false;

	constructor(private readonly sampleRateHz: number) {
		this.onset = new Onset(sampleRateHz, MAX_PARTIALS);
		this.knock = new Knock(sampleRateHz);
		this.glideSamples = Math.round(GLIDE_SECONDS * sampleRateHz);
	}

	/** Whether the voice still sounds. */
	get active(): boolean {
		return this.sounding;
	}

	/** Number of partials that have not died away. */
	get soundingPartials(): number {
		let count = 0;
		for (let p = 0; p < this.alive.length; p += 1) count += this.alive[p];
		return count;
	}

	/** True when a strike of this plan adds to what sounds, false when it starts afresh. */
	continues(plan: VoicePlan): boolean {
		return this.sounding && this.plan !== null && this.plan.key === plan.key;
	}

	/** The next sample's value, without the knock: what would be cut off by starting afresh. */
	nextSample(): number {
		let sum = 0;
		for (let i = 0; i < this.stateRe.length; i += 1) sum += this.stateRe[i];
		return sum;
	}

	/** Silences the voice at once. */
	reset(): void {
		this.stateRe.fill(0);
		this.stateIm.fill(0);
		this.alive.fill(0);
		this.onset.cancel();
		this.knock.scale(0);
		this.sounding = false;
	}

	/** Strikes the strings of a plan. */
	strike(plan: VoicePlan): void {
		if (!this.continues(plan)) this.reset();
		this.plan = plan;
		this.strings = plan.stringF1Hz.length;
		this.extraDecay = 0;
		for (let s = 0; s < this.strings; s += 1) {
			this.f1Hz[s] = plan.stringF1Hz[s];
			this.targetHz[s] = plan.stringF1Hz[s];
			this.glideLeft[s] = 0;
			this.muted[s] = plan.stringMuted[s];
		}
		this.arrange();
		this.onset.start(plan, this.meanF1Hz());
		this.knock.start(plan.knockLevel, plan.knockSeed);
		this.alive.fill(1, 0, plan.stretch.length);
		this.sounding = plan.stretch.length > 0;
	}

	/** Sends string `s` to a new first partial; it glides there in 20 ms, its phase continuous. */
	retune(s: number, f1Hz: number): void {
		if (!this.plan || s < 0 || s >= this.strings || !(f1Hz > 0)) return;
		this.targetHz[s] = f1Hz;
		this.glideLeft[s] = this.glideSamples;
		if (this.plan.twinOf === s) this.retune(this.strings - 1, f1Hz * this.plan.twinRatio);
	}

	/** Lays the mute on string `s` or takes it off. */
	mute(s: number, muted: boolean): void {
		if (!this.plan || s < 0 || s >= this.strings) return;
		this.muted[s] = muted ? 1 : 0;
		if (this.plan.twinOf === s) this.muted[this.strings - 1] = this.muted[s];
		this.arrange();
	}

	/** Lets the damper fall. */
	damp(): void {
		if (!this.plan) return;
		this.extraDecay = Math.max(this.extraDecay, this.plan.damperPerSecond);
		this.refresh();
	}

	/** Fades the voice out in a few hundredths of a second. */
	stop(): void {
		if (!this.plan) return;
		this.extraDecay = STOP_DECAY_PER_SECOND;
		this.onset.cancel();
		this.knock.scale(0.1);
		this.refresh();
	}

	/** Adds `count` samples (at most a render quantum) to `out` from `from`. */
	process(out: Float64Array, from: number, count: number): void {
		if (!this.sounding) return;
		this.glide(count);
		const driven = Math.min(count, this.onset.remaining);
		if (driven > 0) this.runDriven(out, from, driven);
		if (count > driven) this.runFree(out, from + driven, count - driven);
		this.knock.add(out, from, count);
		this.settle();
	}

	private meanF1Hz(): number {
		let sum = 0;
		for (let s = 0; s < this.strings; s += 1) sum += this.f1Hz[s];
		return sum / this.strings;
	}

	/** Works out which strings are coupled and all coefficients anew. */
	private arrange(): void {
		const plan = this.plan as VoicePlan;
		let count = 0;
		for (let s = 0; s < this.strings; s += 1) {
			const free = this.muted[s] === 0 && plan.stringSolo[s] === 0;
			this.coupled[s] = free ? 1 : 0;
			this.gain[s] = this.muted[s] === 0 ? plan.stringGain[s] : 0;
			if (free) this.coupledAt[count++] = s;
		}
		if (count < 2) {
			this.coupled.fill(0);
			count = 0;
		}
		this.coupledCount = count;
		writeCoupling(plan, count, this.sampleRateHz, this.couplingRe, this.couplingIm);
		this.refresh();
	}

	private refresh(): void {
		for (let s = 0; s < this.strings; s += 1) this.refreshString(s);
	}

	private refreshString(s: number): void {
		const plan = this.plan as VoicePlan;
		writeSteps(plan, this, s, this.stride, this.sampleRateHz, this.stepRe, this.stepIm);
	}

	private glide(count: number): void {
		for (let s = 0; s < this.strings; s += 1) {
			const left = this.glideLeft[s];
			if (left <= 0) continue;
			const share = Math.min(1, count / left);
			this.f1Hz[s] += share * (this.targetHz[s] - this.f1Hz[s]);
			this.glideLeft[s] = Math.max(0, left - count);
			if (this.glideLeft[s] === 0) this.f1Hz[s] = this.targetHz[s];
			this.refreshString(s);
		}
	}

	private runDriven(out: Float64Array, from: number, count: number): void {
		const partials = (this.plan as VoicePlan).stretch.length;
		for (let p = 0; p < partials; p += 1) {
			this.onset.runCell(this, p, this.coupled, this.gain, this.strings, out, from, count);
		}
		this.onset.advance(count);
	}

	private runFree(out: Float64Array, from: number, count: number): void {
		const partials = (this.plan as VoicePlan).stretch.length;
		const first = this.coupledAt[0];
		const second = this.coupledAt[1];
		for (let p = 0; p < partials; p += 1) {
			if (this.alive[p] === 0) continue;
			const base = p * this.stride;
			if (this.coupledCount === 3) runThree(this, p, base, out, from, count);
			else if (this.coupledCount === 2) {
				runTwo(this, p, base + first, base + second, out, from, count);
			}
			for (let s = 0; s < this.strings; s += 1) {
				if (this.coupled[s] === 0) runOne(this, base + s, out, from, count);
			}
		}
	}

	/** Takes out partials that have died away, so that no denormal numbers arise. */
	private settle(): void {
		if (this.onset.remaining > 0) return;
		const partials = (this.plan as VoicePlan).stretch.length;
		let any = this.knock.active;
		for (let p = 0; p < partials; p += 1) {
			if (this.alive[p] === 0) continue;
			let energy = 0;
			const end = p * this.stride + this.strings;
			for (let i = p * this.stride; i < end; i += 1) {
				energy += this.stateRe[i] * this.stateRe[i] + this.stateIm[i] * this.stateIm[i];
			}
			if (energy < SILENCE) {
				for (let i = p * this.stride; i < end; i += 1) {
					this.stateRe[i] = 0;
					this.stateIm[i] = 0;
				}
				this.alive[p] = 0;
			} else any = true;
		}
		this.sounding = any;
	}
}
