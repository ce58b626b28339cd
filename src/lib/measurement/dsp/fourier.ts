import FFT from 'fft.js';

/**
 * Discrete Fourier transforms on interleaved complex arrays (re, im, re, im, ...).
 * Plans are kept per size: a plan is a table of twiddle factors and holds no signal.
 */
const plans = new Map<number, FFT>();

function planOf(size: number): FFT {
	let plan = plans.get(size);
	if (!plan) {
		plan = new FFT(size);
		plans.set(size, plan);
	}
	return plan;
}

/** The smallest power of two that is at least `n` (and at least 2). */
export function powerOfTwoAbove(n: number): number {
	let size = 2;
	while (size < n) size *= 2;
	return size;
}

/**
 * Spectrum of a real signal, zero-padded to `size` (a power of two).
 * @returns interleaved bins 0..size/2; the negative frequencies are not filled in.
 */
export function realSpectrum(signal: Float64Array, size: number): Float64Array {
	const padded = new Float64Array(size);
	padded.set(signal.length > size ? signal.subarray(0, size) : signal);
	const out = new Float64Array(2 * size);
	planOf(size).realTransform(out, padded);
	return out.subarray(0, size + 2);
}

/** Forward transform of an interleaved complex array whose length is twice a power of two. */
export function complexSpectrum(interleaved: Float64Array): Float64Array {
	const out = new Float64Array(interleaved.length);
	planOf(interleaved.length / 2).transform(out, interleaved);
	return out;
}

/** Inverse transform (scaled by 1/size) of an interleaved complex array. */
export function inverseSpectrum(interleaved: Float64Array): Float64Array {
	const out = new Float64Array(interleaved.length);
	planOf(interleaved.length / 2).inverseTransform(out, interleaved);
	return out;
}
