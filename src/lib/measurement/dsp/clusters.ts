import { poleStep, type Component } from './refine';

/** Two groups of components, parted by frequency, and the beat between them. */
export interface Split {
	/** Beat between the groups' sums, weighted by the visible ripple. */
	rateHz: number;
	/** The same rate weighted by energy times ripple: where the sound is loud. */
	energyRateHz: number;
	/** Distance of the groups' centres over their own widths. */
	separation: number;
	/** 2·sqrt(E_A·E_B)/(E_A + E_B): 1 for equal groups. */
	depth: number;
	/** Cycles that can be seen before one group or the whole is gone. */
	cycles: number;
	/** Centres of the groups, hertz re the band's centre. */
	lowHz: number;
	highHz: number;
	/** Widths of the groups in hertz. */
	lowSpreadHz: number;
	highSpreadHz: number;
	/** The groups' components. */
	low: Component[];
	high: Component[];
}

export interface SplitWindow {
	rateHz: number;
	/** First and last sample used. */
	from: number;
	to: number;
	/** Noise power within the band: what lies below it is not heard. */
	floorPower?: number;
}

const VISIBLE_RIPPLE = 0.15;
const VISIBLE_LEVEL_DB = -35;

/** Energy of one component within a window. */
function windowEnergy(part: Component, window: SplitWindow): number {
	const size = Math.exp((-2 * part.decayPerSecond) / window.rateHz);
	const first = size ** window.from;
	const last = size ** (window.to + 1);
	const power = part.amplitudeRe ** 2 + part.amplitudeIm ** 2;
	if (Math.abs(1 - size) < 1e-9) return power * (window.to - window.from + 1);
	return (power * (first - last)) / (1 - size);
}

/** Components worth hearing: not far below the strongest, not mere attack, inside the band. */
export function audibleComponents(
	components: readonly Component[],
	window: SplitWindow,
	belowDb: number,
	maxHz: number
): Component[] {
	const inside = components.filter(
		(part) => part.decayPerSecond < 15 && Math.abs(part.hz) <= maxHz
	);
	const strongest = Math.max(0, ...inside.map((part) => windowEnergy(part, window)));
	return inside
		.filter((part) => windowEnergy(part, window) >= strongest * 10 ** (belowDb / 10))
		.sort((a, b) => a.hz - b.hz);
}

function centre(
	parts: Component[],
	window: SplitWindow
): [hz: number, spread: number, energy: number] {
	let energy = 0;
	let sum = 0;
	let squares = 0;
	for (const part of parts) {
		const e = windowEnergy(part, window);
		energy += e;
		sum += e * part.hz;
		squares += e * part.hz * part.hz;
	}
	const hz = sum / energy;
	return [hz, Math.sqrt(Math.max(0, squares / energy - hz * hz)), energy];
}

/** Sum of components over the window, re and im interleaved. */
function sumOf(parts: Component[], window: SplitWindow): Float64Array {
	const length = window.to - window.from + 1;
	const out = new Float64Array(2 * length);
	for (const part of parts) {
		const [pRe, pIm] = poleStep(part, window.rateHz);
		const size = Math.exp((-part.decayPerSecond * window.from) / window.rateHz);
		const angle = (2 * Math.PI * part.hz * window.from) / window.rateHz;
		const turnRe = size * Math.cos(angle);
		const turnIm = size * Math.sin(angle);
		let re = part.amplitudeRe * turnRe - part.amplitudeIm * turnIm;
		let im = part.amplitudeRe * turnIm + part.amplitudeIm * turnRe;
		for (let n = 0; n < 2 * length; n += 2) {
			out[n] += re;
			out[n + 1] += im;
			const next = re * pRe - im * pIm;
			im = re * pIm + im * pRe;
			re = next;
		}
	}
	return out;
}

/**
 * The beat between two sums: the mean turning rate of u = 2·z_A·conj(z_B)/(|z_A|² + |z_B|²).
 */
function turningRate(
	a: Float64Array,
	b: Float64Array,
	{ rateHz, floorPower = 0 }: SplitWindow
): { rateHz: number; energyRateHz: number; visibleSeconds: number } {
	let re = 0;
	let im = 0;
	let loudRe = 0;
	let loudIm = 0;
	let previousRe = 0;
	let previousIm = 0;
	let previousPower = 0;
	let visible = 0;
	let maxPower = 0;
	for (let n = 0; n < a.length; n += 2) {
		const powerA = a[n] ** 2 + a[n + 1] ** 2;
		const powerB = b[n] ** 2 + b[n + 1] ** 2;
		maxPower = Math.max(maxPower, powerA + powerB);
	}
	const floor = Math.max(maxPower * 10 ** (VISIBLE_LEVEL_DB / 10), floorPower);
	for (let n = 0; n < a.length; n += 2) {
		const power = a[n] ** 2 + a[n + 1] ** 2 + b[n] ** 2 + b[n + 1] ** 2 + 1e-300;
		const uRe = (2 * (a[n] * b[n] + a[n + 1] * b[n + 1])) / power;
		const uIm = (2 * (a[n + 1] * b[n] - a[n] * b[n + 1])) / power;
		if (n > 0) {
			const stepRe = uRe * previousRe + uIm * previousIm;
			const stepIm = uIm * previousRe - uRe * previousIm;
			re += stepRe;
			im += stepIm;
			loudRe += stepRe * Math.sqrt(power * previousPower);
			loudIm += stepIm * Math.sqrt(power * previousPower);
		}
		if (Math.hypot(uRe, uIm) >= VISIBLE_RIPPLE && power > floor) visible++;
		[previousRe, previousIm, previousPower] = [uRe, uIm, power];
	}
	const scale = rateHz / (2 * Math.PI);
	return {
		rateHz: scale * Math.atan2(im, re),
		energyRateHz: scale * Math.atan2(loudIm, loudRe),
		visibleSeconds: visible / rateHz
	};
}

/** The split of two groups of components (lower group first). */
export function describeSplit(low: Component[], high: Component[], window: SplitWindow): Split {
	const [lowHz, lowSpreadHz, lowEnergy] = centre(low, window);
	const [highHz, highSpreadHz, highEnergy] = centre(high, window);
	const turning = turningRate(sumOf(high, window), sumOf(low, window), window);
	const rateHz = Math.abs(turning.rateHz);
	return {
		rateHz,
		energyRateHz: Math.abs(turning.energyRateHz),
		separation: (highHz - lowHz) / (lowSpreadHz + highSpreadHz + 0.05),
		depth: (2 * Math.sqrt(lowEnergy * highEnergy)) / (lowEnergy + highEnergy),
		cycles: rateHz * turning.visibleSeconds,
		lowHz,
		highHz,
		lowSpreadHz,
		highSpreadHz,
		low,
		high
	};
}

/** Every way of parting the components, sorted by frequency, into low and high. */
export function allSplits(parts: readonly Component[], window: SplitWindow): Split[] {
	const splits: Split[] = [];
	for (let cut = 1; cut < parts.length; cut++) {
		splits.push(describeSplit(parts.slice(0, cut), parts.slice(cut), window));
	}
	return splits;
}

/**
 * Every pair of single components as a split of its own, its depth seen within the whole sound:
 * 2·sqrt(E_i·E_j)/ΣE.
 */
export function allPairs(parts: readonly Component[], window: SplitWindow): Split[] {
	const pairs: Split[] = [];
	const whole = parts.reduce((sum, part) => sum + windowEnergy(part, window), 0);
	for (let i = 0; i < parts.length; i++) {
		for (let j = i + 1; j < parts.length; j++) {
			const two = windowEnergy(parts[i], window) + windowEnergy(parts[j], window);
			const split = describeSplit([parts[i]], [parts[j]], window);
			pairs.push({ ...split, depth: (split.depth * two) / whole });
		}
	}
	return pairs;
}

/**
 * Time from the window's start until the components' sum stays 30 dB below its greatest, or below
 * the noise.
 */
export function visibleSeconds(parts: Component[], window: SplitWindow): number {
	const z = sumOf(parts, window);
	let max = 0;
	for (let n = 0; n < z.length; n += 2) max = Math.max(max, z[n] ** 2 + z[n + 1] ** 2);
	const floor = Math.max(1e-3 * max, window.floorPower ?? 0);
	let last = z.length - 2;
	while (last > 0 && z[last] ** 2 + z[last + 1] ** 2 < floor) last -= 2;
	return (last / 2 + 1) / window.rateHz;
}
