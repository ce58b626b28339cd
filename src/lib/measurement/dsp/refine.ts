import { invertComplex, multiplyComplex, solveComplex, type ComplexMatrix } from './complex-matrix';
import { correlate, powerSums } from './pole-sums';

/** One damped component of a band: frequency relative to the band's centre, decay of amplitude. */
export interface Pole {
	hz: number;
	decayPerSecond: number;
}

/** A component with its complex amplitude at the band's first sample. */
export interface Component extends Pole {
	amplitudeRe: number;
	amplitudeIm: number;
	/** Σ |a·p^n|² over the band's samples. */
	energy: number;
}

export interface PoleFit {
	components: Component[];
	/** Σ |z|² that the components leave over. */
	residualEnergy: number;
	/**
	 * Inverse of J^H·J of the poles (per second), amplitudes projected out: times half the noise
	 * variance per complex sample it is the variance of a pole's real and of its imaginary part.
	 */
	poleCovariance: ComplexMatrix | null;
}

export interface RefineOptions {
	rateHz: number;
	iterations: number;
	maxHz: number;
	minDecayPerSecond?: number;
	maxDecayPerSecond?: number;
}

interface Normal {
	amplitudes: Float64Array;
	residualEnergy: number;
	/** J^H·J and J^H·r of the poles, in units of one sample step. */
	curvature: ComplexMatrix;
	gradient: Float64Array;
}

/**
 * Least-squares fit of damped exponentials by variable projection: the amplitudes are solved
 * anew for each set of poles (Golub & Pereyra 1973, SIAM J. Numer. Anal. 10:413, with Kaufman's
 * simplification of the Jacobian), the poles move by Levenberg–Marquardt steps. All matrices are
 * K × K: inner products of exponentials come from power sums, not from the samples.
 * @param z interleaved complex samples
 */
export function refinePoles(
	z: Float64Array,
	start: readonly Pole[],
	options: RefineOptions
): PoleFit | null {
	const count = start.length;
	const energy = energyOf(z);
	let poles = start.map((pole) => bounded(pole, options));
	let normal = evaluate(z, energy, poles, options.rateHz);
	if (!normal) return null;
	let damping = 1e-3;
	for (let turn = 0; turn < options.iterations; turn++) {
		const step = damped(normal, count, damping);
		if (!step) break;
		const next = poles.map((pole, k) => bounded(moved(pole, step, k, options.rateHz), options));
		const tried = evaluate(z, energy, next, options.rateHz);
		if (tried && tried.residualEnergy <= normal.residualEnergy) {
			const gain = normal.residualEnergy - tried.residualEnergy;
			poles = next;
			normal = tried;
			damping = Math.max(damping / 6, 1e-9);
			if (gain < 1e-7 * normal.residualEnergy) break;
		} else {
			damping *= 8;
			if (damping > 1e6) break;
		}
	}
	return toFit(poles, normal, z.length / 2, options.rateHz);
}

export function energyOf(z: Float64Array): number {
	let sum = 0;
	for (const value of z) sum += value * value;
	return sum;
}

function bounded(pole: Pole, options: RefineOptions): Pole {
	const low = options.minDecayPerSecond ?? 0;
	const high = options.maxDecayPerSecond ?? 40;
	return {
		hz: Math.min(Math.max(pole.hz, -options.maxHz), options.maxHz),
		decayPerSecond: Math.min(Math.max(pole.decayPerSecond, low), high)
	};
}

function moved(pole: Pole, step: Float64Array, k: number, rateHz: number): Pole {
	return {
		hz: pole.hz + (step[2 * k + 1] * rateHz) / (2 * Math.PI),
		decayPerSecond: pole.decayPerSecond - step[2 * k] * rateHz
	};
}

/** p = exp((-decay + j·2π·hz)/rate). */
export function poleStep(pole: Pole, rateHz: number): [re: number, im: number] {
	const size = Math.exp(-pole.decayPerSecond / rateHz);
	const angle = (2 * Math.PI * pole.hz) / rateHz;
	return [size * Math.cos(angle), size * Math.sin(angle)];
}

function damped(normal: Normal, count: number, damping: number): Float64Array | null {
	const h = Float64Array.from(normal.curvature);
	for (let i = 0; i < count; i++) h[2 * (i * count + i)] *= 1 + damping;
	for (let i = 0; i < count; i++) if (!(h[2 * (i * count + i)] > 0)) return null;
	return solveComplex(h, normal.gradient, count, 1);
}

function evaluate(z: Float64Array, energy: number, poles: Pole[], rateHz: number): Normal | null {
	const count = poles.length;
	const samples = z.length / 2;
	const steps = poles.map((pole) => poleStep(pole, rateHz));
	const gram = new Float64Array(2 * count * count);
	const slope = new Float64Array(2 * count * count);
	const square = new Float64Array(2 * count * count);
	fillSums(steps, samples, gram, slope, square);
	const right = new Float64Array(2 * count);
	const slopeRight = new Float64Array(2 * count);
	steps.forEach(([re, im], k) => {
		[right[2 * k], right[2 * k + 1], slopeRight[2 * k], slopeRight[2 * k + 1]] = correlate(
			z,
			re,
			im
		);
	});
	const amplitudes = solveComplex(gram, right, count, 1);
	if (!amplitudes) return null;
	let explained = 0;
	for (let i = 0; i < 2 * count; i++) explained += amplitudes[i] * right[i];
	return derivatives(amplitudes, energy - explained, gram, slope, square, slopeRight, count);
}

/** Gram matrices Σ conj(p_i)^n p_j^n times 1, n and n². */
function fillSums(
	steps: [number, number][],
	samples: number,
	gram: ComplexMatrix,
	slope: ComplexMatrix,
	square: ComplexMatrix
): void {
	const count = steps.length;
	for (let i = 0; i < count; i++) {
		for (let j = i; j < count; j++) {
			const [aRe, aIm] = steps[i];
			const [bRe, bIm] = steps[j];
			const sums = powerSums(aRe * bRe + aIm * bIm, aRe * bIm - aIm * bRe, samples);
			const upper = 2 * (i * count + j);
			const lower = 2 * (j * count + i);
			[gram, slope, square].forEach((matrix, power) => {
				matrix[upper] = matrix[lower] = sums[2 * power];
				matrix[upper + 1] = sums[2 * power + 1];
				matrix[lower + 1] = -sums[2 * power + 1];
			});
		}
	}
}

function derivatives(
	amplitudes: Float64Array,
	residualEnergy: number,
	gram: ComplexMatrix,
	slope: ComplexMatrix,
	square: ComplexMatrix,
	slopeRight: Float64Array,
	count: number
): Normal | null {
	// With D = diag-scaled n·p^n: J = -(I - P)·D, so J^H·J = D^H·D - D^H·Φ·G^-1·Φ^H·D.
	const solved = solveComplex(gram, slope, count, count);
	if (!solved) return null;
	const projected = multiplyComplex(slope, solved, count, count, count);
	const model = multiplyComplex(slope, amplitudes, count, count, 1);
	const curvature = new Float64Array(2 * count * count);
	const gradient = new Float64Array(2 * count);
	for (let i = 0; i < count; i++) {
		const aRe = amplitudes[2 * i];
		const aIm = amplitudes[2 * i + 1];
		const rRe = slopeRight[2 * i] - model[2 * i];
		const rIm = slopeRight[2 * i + 1] - model[2 * i + 1];
		gradient[2 * i] = aRe * rRe + aIm * rIm;
		gradient[2 * i + 1] = aRe * rIm - aIm * rRe;
		for (let j = 0; j < count; j++) {
			const at = 2 * (i * count + j);
			const hRe = square[at] - projected[at];
			const hIm = square[at + 1] - projected[at + 1];
			const bRe = aRe * amplitudes[2 * j] + aIm * amplitudes[2 * j + 1];
			const bIm = aRe * amplitudes[2 * j + 1] - aIm * amplitudes[2 * j];
			curvature[at] = hRe * bRe - hIm * bIm;
			curvature[at + 1] = hRe * bIm + hIm * bRe;
		}
	}
	return { amplitudes, residualEnergy, curvature, gradient };
}

function toFit(poles: Pole[], normal: Normal, samples: number, rateHz: number): PoleFit {
	const count = poles.length;
	const components = poles.map((pole, k) => {
		const amplitudeRe = normal.amplitudes[2 * k];
		const amplitudeIm = normal.amplitudes[2 * k + 1];
		const size = Math.exp((-2 * pole.decayPerSecond) / rateHz);
		const energy = (amplitudeRe ** 2 + amplitudeIm ** 2) * powerSums(size, 0, samples)[0];
		return { ...pole, amplitudeRe, amplitudeIm, energy };
	});
	const inverse = invertComplex(normal.curvature, count);
	const poleCovariance = inverse ? inverse.map((value) => value * rateHz * rateHz) : null;
	return { components, residualEnergy: Math.max(0, normal.residualEnergy), poleCovariance };
}

/** z minus the fitted components. */
export function residualOf(z: Float64Array, fit: PoleFit, rateHz: number): Float64Array {
	const rest = Float64Array.from(z);
	for (const component of fit.components) {
		const [pRe, pIm] = poleStep(component, rateHz);
		let re = component.amplitudeRe;
		let im = component.amplitudeIm;
		for (let n = 0; n < rest.length; n += 2) {
			rest[n] -= re;
			rest[n + 1] -= im;
			const next = re * pRe - im * pIm;
			im = re * pIm + im * pRe;
			re = next;
		}
	}
	return rest;
}
