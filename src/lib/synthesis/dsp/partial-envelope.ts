import { centsBetween } from '../../acoustics/units';
import type { VoiceSpec } from '../types';
import { complexMatrix, matrixExponential, type ComplexMatrix } from './complex-matrix';
import { planVoice, type VoicePlan } from './voice-plan';

/** Loudness of one coincident partial over time, as the model has it. */
export interface PartialEnvelope {
	timesS: number[];
	/** dB relative to a full-scale sine; −120 at the least. */
	levelDb: number[];
	/** Moments at which a beat is quietest, s. */
	quietestS: number[];
}

/** A partial further than this from the wanted frequency is another pitch, cents. */
const REACH_CENTS = 150;
const FLOOR_DB = -120;
/** A dip shallower than this on both sides is no beat, dB. */
const SHALLOWEST_DIP_DB = 0.5;
/** The envelope is worked out at least this often, Hz; beats are far slower. */
const FINE_RATE_HZ = 400;
/** High enough that no audible partial is left out of the plan. */
const PLAN_RATE_HZ = 48_000;

/** One partial of one voice in a frame that turns with the reference frequency. */
interface Group {
	step: ComplexMatrix;
	re: Float64Array;
	im: Float64Array;
}

function nearestPartial(plan: VoicePlan, frequencyHz: number): number {
	let best = -1;
	let bestCents = REACH_CENTS;
	for (let p = 0; p < plan.stretch.length; p += 1) {
		const cents = Math.abs(centsBetween(plan.stretch[p] * plan.stringF1Hz[0], frequencyHz));
		if (cents < bestCents) {
			best = p;
			bestCents = cents;
		}
	}
	return best;
}

function groupOf(plan: VoicePlan, p: number, referenceHz: number, dt: number): Group {
	const strings = plan.stringF1Hz.length;
	const coupled = [...plan.stringSolo].map((solo, s) => !solo && !plan.stringMuted[s]);
	const together = coupled.filter(Boolean).length >= 2;
	const generator = complexMatrix(strings);
	const re = new Float64Array(strings);
	const im = new Float64Array(strings);
	for (let s = 0; s < strings; s += 1) {
		const struck = plan.stringMuted[s] ? 0 : plan.stringGain[s];
		re[s] = struck * plan.driveRe[p];
		im[s] = struck * plan.driveIm[p];
		const own = together && coupled[s];
		const omega = 2 * Math.PI * (plan.stretch[p] * plan.stringF1Hz[s] - referenceHz);
		generator.re[s * strings + s] = -(plan.ownDecay[p] + (own ? 0 : plan.bridgeRe[p])) * dt;
		generator.im[s * strings + s] = (omega + (own ? plan.bridgeIm[p] : 0)) * dt;
		for (let j = 0; own && j < strings; j += 1) {
			if (!coupled[j]) continue;
			generator.re[s * strings + j] -= plan.bridgeRe[p] * dt;
			generator.im[s * strings + j] -= plan.bridgeIm[p] * dt;
		}
	}
	return { step: matrixExponential(generator), re, im };
}

function advance(group: Group): void {
	const { size } = group.step;
	const re = new Float64Array(size);
	const im = new Float64Array(size);
	for (let i = 0; i < size; i += 1) {
		for (let k = 0; k < size; k += 1) {
			const m = i * size + k;
			re[i] += group.step.re[m] * group.re[k] - group.step.im[m] * group.im[k];
			im[i] += group.step.re[m] * group.im[k] + group.step.im[m] * group.re[k];
		}
	}
	group.re = re;
	group.im = im;
}

/** Local minima that lie at least half a decibel below the crests on both sides. */
function quietest(level: Float64Array, dt: number): number[] {
	const dips: number[] = [];
	let crest = level[0];
	let dip = -1;
	for (let k = 1; k < level.length; k += 1) {
		if (dip < 0) {
			if (level[k] > crest) crest = level[k];
			else if (level[k] < crest - SHALLOWEST_DIP_DB) dip = k;
		} else if (level[k] < level[dip]) dip = k;
		else if (level[k] > level[dip] + SHALLOWEST_DIP_DB) {
			dips.push(dip * dt);
			crest = level[k];
			dip = -1;
		}
	}
	return dips;
}

/**
 * Loudness over time of the partial at which the voices coincide, worked out from the coupled
 * strings themselves (the exact solution, not an analysis of samples): the sum of the partials of
 * all voices nearest to `frequencyHz`, struck together at time 0. The few milliseconds of the
 * onset are left out.
 * @param voices the notes as they were struck; a voice with no partial near is left out
 * @param frequencyHz the coincident partial, Hz
 * @param seconds length, above 0
 * @param points number of points, at least 2
 */
export function partialEnvelope(
	voices: readonly VoiceSpec[],
	frequencyHz: number,
	seconds: number,
	points: number
): PartialEnvelope {
	const perPoint = Math.max(1, Math.ceil((FINE_RATE_HZ * seconds) / (points - 1)));
	const dt = seconds / ((points - 1) * perPoint);
	const groups: Group[] = [];
	for (const voice of voices) {
		const plan = planVoice(voice, PLAN_RATE_HZ);
		const p = nearestPartial(plan, frequencyHz);
		if (p >= 0) groups.push(groupOf(plan, p, frequencyHz, dt));
	}
	const fine = new Float64Array((points - 1) * perPoint + 1);
	for (let k = 0; k < fine.length; k += 1) {
		let re = 0;
		let im = 0;
		for (const group of groups) {
			for (let s = 0; s < group.re.length; s += 1) {
				re += group.re[s];
				im += group.im[s];
			}
			advance(group);
		}
		fine[k] = Math.max(FLOOR_DB, 20 * Math.log10(Math.hypot(re, im) + 1e-12));
	}
	const timesS = Array.from({ length: points }, (_, i) => i * perPoint * dt);
	return {
		timesS,
		levelDb: timesS.map((_, i) => fine[i * perPoint]),
		quietestS: quietest(fine, dt)
	};
}
