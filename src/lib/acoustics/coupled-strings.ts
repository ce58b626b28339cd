import {
	add,
	divide,
	magnitude,
	multiply,
	polynomialRoots,
	subtract,
	type Complex
} from './complex';
import type { BeatsPerSecond, Hertz } from './units';

/** One way in which the strings of a note sound together: a decaying sinusoid. */
export interface CoupledMode {
	frequencyRadPerSecond: number;
	/** Amplitude decay, 1/s. */
	decayPerSecond: number;
	/** Share of the mode in what the bridge hears when every string starts with 1. */
	excitation: Complex;
}

interface DistinctString {
	offset: Complex;
	count: number;
}

/**
 * ω to give to a string so that it sounds at `frequencyHz` when the other strings are muted: the
 * bridge's reactance lowers it by Im η (see {@link coupledModes}).
 */
export function uncoupledOmega(frequencyHz: Hertz, bridgeReactancePerSecond: number): number {
	return 2 * Math.PI * frequencyHz + bridgeReactancePerSecond;
}

/**
 * Eigenmodes of one to three strings on one bridge,
 *   a_s' = (i·ω_s − γ)·a_s − η·Σ_j a_j        (Weinreich 1977, J. Acoust. Soc. Am. 62:1474).
 * Because the coupling is of rank one the eigenvalues μ, measured from the mean, solve
 *   Π(μ − d_s) + η·Σ_s Π_{j≠s}(μ − d_j) = 0 with d_s = i·(ω_s − ω̄); equal strings are merged first,
 * which keeps their modes exact. Sorted from the fastest decay to the slowest.
 * @param stringsOmega ω_s, rad/s, one per string that is not muted (see {@link uncoupledOmega})
 * @param ownDecayPerSecond γ, 1/s
 * @param bridge η, 1/s
 */
export function coupledModes(
	stringsOmega: readonly number[],
	ownDecayPerSecond: number,
	bridge: Complex
): CoupledMode[] {
	if (stringsOmega.length < 1 || stringsOmega.length > 3) {
		throw new RangeError('a note has one to three strings');
	}
	const mean = stringsOmega.reduce((sum, omega) => sum + omega, 0) / stringsOmega.length;
	const strings = mergeEqual(stringsOmega.map((omega) => omega - mean));
	const modes: CoupledMode[] = [];
	for (const string of strings) {
		// Equal strings moving against each other do not move the bridge: mode at their own pitch.
		for (let extra = 1; extra < string.count; extra += 1) {
			modes.push(modeAt(string.offset, { re: 0, im: 0 }, mean, ownDecayPerSecond));
		}
	}
	for (const root of polynomialRoots(secularPolynomial(strings, bridge))) {
		modes.push(modeAt(root, excitationOf(root, strings, bridge), mean, ownDecayPerSecond));
	}
	return modes.sort((a, b) => b.decayPerSecond - a.decayPerSecond);
}

function mergeEqual(offsets: readonly number[]): DistinctString[] {
	const strings: DistinctString[] = [];
	for (const im of offsets) {
		const same = strings.find((string) => Math.abs(string.offset.im - im) < 1e-9);
		if (same) same.count += 1;
		else strings.push({ offset: { re: 0, im }, count: 1 });
	}
	return strings;
}

function modeAt(root: Complex, excitation: Complex, mean: number, ownDecay: number): CoupledMode {
	return {
		frequencyRadPerSecond: mean + root.im,
		decayPerSecond: ownDecay - root.re,
		excitation
	};
}

/** Coefficients of the monic secular polynomial, constant first. */
function secularPolynomial(strings: readonly DistinctString[], bridge: Complex): Complex[] {
	const zero: Complex = { re: 0, im: 0 };
	const times = (polynomial: Complex[], root: Complex): Complex[] =>
		[...polynomial, zero].map((_, k) =>
			subtract(polynomial[k - 1] ?? zero, multiply(polynomial[k] ?? zero, root))
		);
	const productWithout = (left: number): Complex[] =>
		strings.reduce<Complex[]>(
			(product, string, k) => (k === left ? product : times(product, string.offset)),
			[{ re: 1, im: 0 }]
		);
	const whole = productWithout(-1);
	const sum = strings.reduce<Complex[]>(
		(total, string, k) =>
			productWithout(k).map((c, power) =>
				add(total[power] ?? zero, multiply(c, { re: string.count, im: 0 }))
			),
		[]
	);
	return whole.slice(0, -1).map((c, power) => add(c, multiply(bridge, sum[power] ?? zero)));
}

/**
 * Residue of the bridge's response at a mode: 1/(η²·Σ n_s/(μ − d_s)²), which is the mode's share
 * of Σ_j a_j after equal strikes; the shares add up to the number of strings.
 */
function excitationOf(root: Complex, strings: readonly DistinctString[], bridge: Complex): Complex {
	if (magnitude(bridge) === 0) {
		const own = strings.find((string) => magnitude(subtract(root, string.offset)) < 1e-9);
		return { re: own?.count ?? 0, im: 0 };
	}
	const sum = strings.reduce<Complex>(
		(total, string) => {
			const inverse = divide({ re: 1, im: 0 }, subtract(root, string.offset));
			return add(total, multiply({ re: string.count, im: 0 }, multiply(inverse, inverse)));
		},
		{ re: 0, im: 0 }
	);
	return divide({ re: 1, im: 0 }, multiply(multiply(bridge, bridge), sum));
}

/** Moment after the strike at which {@link rateHeardHz} weighs the modes. */
const LISTENING_S = 1;

/**
 * Beat heard between the modes of one partial, b/s: the difference of eigenfrequencies of the
 * pair of modes that is strongest one second after the strike. A pair beats only when its modes
 * differ more in frequency than in decay; otherwise one is gone before a beat is complete: the
 * strings are *locked* and the answer is 0. For two strings and a resistive bridge this is
 * sqrt(Δf² − (Re η/π)²), 0 below {@link lockingLimitHz}. A lone string gives 0.
 */
export function rateHeardHz(modes: readonly CoupledMode[]): BeatsPerSecond {
	let strongest = 0;
	let rate = 0;
	for (let a = 0; a < modes.length; a += 1) {
		for (let b = a + 1; b < modes.length; b += 1) {
			const apart = Math.abs(modes[a].frequencyRadPerSecond - modes[b].frequencyRadPerSecond);
			const fading = Math.abs(modes[a].decayPerSecond - modes[b].decayPerSecond);
			const strength =
				magnitude(modes[a].excitation) *
				magnitude(modes[b].excitation) *
				Math.exp(-(modes[a].decayPerSecond + modes[b].decayPerSecond) * LISTENING_S);
			if (apart > fading && apart > 1e-9 && strength > strongest) {
				strongest = strength;
				rate = apart / (2 * Math.PI);
			}
		}
	}
	return rate;
}

/**
 * Mistuning below which two strings on a resistive bridge do not beat: Re η/π, Hz
 * (D/(8.686·π) with D the lone string's decay through the bridge in dB/s).
 */
export function lockingLimitHz(bridgePerSecond: number): Hertz {
	return bridgePerSecond / Math.PI;
}
