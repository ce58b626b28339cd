import type { OrderFit } from './orders';
import type { RuledRate } from './rate-rule';
import type { Component } from './refine';

/** Two-sided 95 % quantile of Student's t. */
export function studentQuantile95(freedom: number): number {
	// Hill 1970, Comm. ACM 13:617, expansion about the normal quantile; exact enough from 3 on.
	const z = 1.959964;
	const n = Math.max(2, freedom);
	const g1 = (z ** 3 + z) / 4;
	const g2 = (5 * z ** 5 + 16 * z ** 3 + 3 * z) / 96;
	const g3 = (3 * z ** 7 + 19 * z ** 5 + 17 * z ** 3 - 15 * z) / 384;
	return z + g1 / n + g2 / n ** 2 + g3 / n ** 3;
}

/**
 * Standard deviation, in hertz, of the distance between the energy-weighted centres of two groups
 * of a fit's components: from the Fisher matrix of damped exponentials in the noise that the
 * residual shows.
 */
export function fisherSd(
	order: OrderFit,
	low: readonly Component[],
	high: readonly Component[]
): number {
	const { components, poleCovariance } = order.fit;
	if (!poleCovariance) return Infinity;
	const n = components.length;
	const weight = new Float64Array(n);
	for (const [group, sign] of [
		[low, -1],
		[high, 1]
	] as const) {
		const total = group.reduce((sum, part) => sum + part.energy, 0);
		for (const part of group) weight[components.indexOf(part)] += (sign * part.energy) / total;
	}
	let variance = 0;
	for (let i = 0; i < n; i++) {
		for (let j = 0; j < n; j++) variance += weight[i] * weight[j] * poleCovariance[2 * (i * n + j)];
	}
	const noise = Math.max(...[...low, ...high].map(({ hz }) => order.rest.varianceNear(hz)));
	return Math.sqrt(Math.max(0, 0.5 * noise * variance)) / (2 * Math.PI);
}

/** Smallest half-width that is ever stated, in hertz. */
export const FLOOR_HZ = 0.01;

export interface ModelWidthInput {
	ruled: RuledRate;
	fisherSdHz: number;
	/** Rates of the variants of the fit that agree with the answer. */
	variantRatesHz: number[];
	/** Rates heard about as well as the answer in the same band. */
	rivalRatesHz: number[];
	/** Length heard in seconds. */
	seconds: number;
}

/**
 * Half-width of the 95 % interval where the components are a model of a richer sound: noise, the
 * scatter over variants of the fit, drift during the decay and the groups' own widths, added as
 * squares.
 */
export function modelHalfWidth(input: ModelWidthInput): number {
	const { split, by } = input.ruled;
	const rate = split.rateHz;
	const scatter = Math.sqrt(
		input.variantRatesHz.reduce((sum, value) => sum + (value - rate) ** 2, 0) /
			Math.max(1, input.variantRatesHz.length)
	);
	const few = split.cycles < 2 ? (by === 'pair' ? 0.4 : 0.2) : 0.06;
	const rival = Math.max(0, ...input.rivalRatesHz.map((value) => Math.abs(value - rate)));
	return Math.hypot(
		2 * input.fisherSdHz,
		rival,
		2 * scatter,
		0.008 * rate,
		0.2 * Math.min(split.lowSpreadHz, split.highSpreadHz),
		0.7 * Math.abs(split.rateHz - split.energyRateHz),
		few / input.seconds,
		FLOOR_HZ
	);
}
