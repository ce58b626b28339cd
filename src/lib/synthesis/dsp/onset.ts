import type { CellArrays } from './string-cells';
import type { VoicePlan } from './voice-plan';

/** Longest onset, s. */
const LONGEST_ONSET_S = 0.006;
/** Share of the strings' old motion that is left when the hammer lets go. */
const LEFT_AFTER_CONTACT = 0.5;

/**
 * The few milliseconds in which the hammer feeds a strike into the strings. Each partial is
 * driven at its own frequency under a bell-shaped window, so that afterwards it rings as if it had
 * been sounding since the strike; what sounded before is partly damped by the touch. Because
 * motion is only ever added smoothly, neither a strike nor a strike on sounding strings clicks.
 */
export class Onset {
	private readonly window: Float64Array;
	private readonly phasorRe: Float64Array;
	private readonly phasorIm: Float64Array;
	private readonly turnRe: Float64Array;
	private readonly turnIm: Float64Array;
	private length = 0;
	private position = 0;
	/** Factor per sample on what sounds already. */
	private touch = 1;

	constructor(
		private readonly sampleRateHz: number,
		maxPartials: number
	) {
		this.window = new Float64Array(Math.ceil(LONGEST_ONSET_S * sampleRateHz) + 1);
		this.phasorRe = new Float64Array(maxPartials);
		this.phasorIm = new Float64Array(maxPartials);
		this.turnRe = new Float64Array(maxPartials);
		this.turnIm = new Float64Array(maxPartials);
	}

	/** Samples still to be driven. */
	get remaining(): number {
		return this.length - this.position;
	}

	cancel(): void {
		this.position = this.length;
	}

	/** Prepares a strike of strings whose mean first partial is `f1Hz`. */
	start(plan: VoicePlan, f1Hz: number): void {
		const wanted = Math.round(plan.onsetSeconds * this.sampleRateHz);
		this.length = Math.min(this.window.length, Math.max(8, wanted));
		this.position = 0;
		this.touch = LEFT_AFTER_CONTACT ** (1 / this.length);
		for (let k = 0; k < this.length; k += 1) {
			const bell = (1 - Math.cos((2 * Math.PI * (k + 0.5)) / this.length)) / this.length;
			// The touch also damps what has just been fed in; the window makes up for it.
			this.window[k] = bell / this.touch ** (this.length - 1 - k);
		}
		for (let p = 0; p < plan.stretch.length; p += 1) {
			const angle = (2 * Math.PI * plan.stretch[p] * f1Hz) / this.sampleRateHz;
			this.turnRe[p] = Math.cos(angle);
			this.turnIm[p] = Math.sin(angle);
			this.phasorRe[p] = plan.driveRe[p];
			this.phasorIm[p] = plan.driveIm[p];
		}
	}

	/**
	 * Runs `count` driven samples of one cell; `gain` is 0 for a string that is not struck.
	 * Slower than the loops of string-cells.ts, but only a few milliseconds of each strike.
	 */
	runCell(
		cells: CellArrays,
		cell: number,
		coupled: Uint8Array,
		gain: Float64Array,
		strings: number,
		out: Float64Array,
		from: number,
		count: number
	): void {
		const { stateRe, stateIm, stepRe, stepIm } = cells;
		const base = cell * cells.stride;
		const kr = cells.couplingRe[cell];
		const ki = cells.couplingIm[cell];
		let qr = this.phasorRe[cell];
		let qi = this.phasorIm[cell];
		for (let t = 0; t < count; t += 1) {
			let sr = 0;
			let si = 0;
			let sum = 0;
			for (let s = 0; s < strings; s += 1) {
				sum += stateRe[base + s];
				sr += coupled[s] * stateRe[base + s];
				si += coupled[s] * stateIm[base + s];
			}
			out[from + t] += sum;
			const cr = kr * sr - ki * si;
			const ci = kr * si + ki * sr;
			const turned = this.turnRe[cell] * qr - this.turnIm[cell] * qi;
			qi = this.turnRe[cell] * qi + this.turnIm[cell] * qr;
			qr = turned;
			const fed = this.window[this.position + t];
			for (let s = 0; s < strings; s += 1) {
				const i = base + s;
				const x = stateRe[i] - coupled[s] * cr;
				const y = stateIm[i] - coupled[s] * ci;
				stateRe[i] = this.touch * (stepRe[i] * x - stepIm[i] * y) + gain[s] * fed * qr;
				stateIm[i] = this.touch * (stepRe[i] * y + stepIm[i] * x) + gain[s] * fed * qi;
			}
		}
		this.phasorRe[cell] = qr;
		this.phasorIm[cell] = qi;
	}

	/** To be called once all cells have run `count` samples. */
	advance(count: number): void {
		this.position += count;
	}
}
