import type { VoicePlan } from './voice-plan';

/** Extra decay of a string under the mute, 1/s: dead within about 0.1 s. */
const MUTE_DECAY_PER_SECOND = 60;
/** A partial pushed this close to half the sample rate by retuning is taken out, not folded. */
const FOLD_LIMIT = 0.49;
const FOLD_DECAY_PER_SECOND = 2000;

/** What a voice is doing now, as far as the coefficients depend on it. */
export interface StringSituation {
	/** f_1 of each string now, Hz. */
	readonly f1Hz: Float64Array;
	readonly muted: Uint8Array;
	/** 1 where the string is coupled to others at present. */
	readonly coupled: Uint8Array;
	/** Extra decay of the whole voice, 1/s: damper or stop. */
	readonly extraDecay: number;
	/** Number of coupled strings. */
	readonly coupledCount: number;
}

/**
 * Exact one-sample steps of string `s` for every partial, written to the `step` arrays. A string
 * in the coupling turns at 2π·f_n + Im η_n and decays at γ_n, the bridge doing the rest; a string
 * on its own sounds at f_n exactly and decays at γ_n + Re η_n.
 */
export function writeSteps(
	plan: VoicePlan,
	now: StringSituation,
	s: number,
	stride: number,
	sampleRateHz: number,
	stepRe: Float64Array,
	stepIm: Float64Array
): void {
	const dt = 1 / sampleRateHz;
	const coupled = now.coupled[s] === 1;
	const extra = now.extraDecay + (now.muted[s] === 1 ? MUTE_DECAY_PER_SECOND : 0);
	for (let p = 0; p < plan.stretch.length; p += 1) {
		const hz = plan.stretch[p] * now.f1Hz[s];
		let decay = plan.ownDecay[p] + extra + (coupled ? 0 : plan.bridgeRe[p]);
		if (hz > FOLD_LIMIT * sampleRateHz) decay += FOLD_DECAY_PER_SECOND;
		const angle = (2 * Math.PI * hz + (coupled ? plan.bridgeIm[p] : 0)) * dt;
		const size = Math.exp(-decay * dt);
		stepRe[p * stride + s] = size * Math.cos(angle);
		stepIm[p * stride + s] = size * Math.sin(angle);
	}
}

/** κ_n = (1 − exp(−N·η_n·dt))/N of every partial. */
export function writeCoupling(
	plan: VoicePlan,
	count: number,
	sampleRateHz: number,
	couplingRe: Float64Array,
	couplingIm: Float64Array
): void {
	for (let p = 0; p < plan.stretch.length; p += 1) {
		if (count < 2) {
			couplingRe[p] = 0;
			couplingIm[p] = 0;
			continue;
		}
		const size = Math.exp((-count * plan.bridgeRe[p]) / sampleRateHz);
		const angle = (-count * plan.bridgeIm[p]) / sampleRateHz;
		couplingRe[p] = (1 - size * Math.cos(angle)) / count;
		couplingIm[p] = (-size * Math.sin(angle)) / count;
	}
}
