/**
 * Inner products of damped exponentials p^n, n = 0..N-1, and of their derivatives n·p^n.
 */

/** S0 = Σ w^n, S1 = Σ n·w^n, S2 = Σ n²·w^n for n = 0..N-1, each re, im. */
export type PowerSums = [
	s0Re: number,
	s0Im: number,
	s1Re: number,
	s1Im: number,
	s2Re: number,
	s2Im: number
];

/**
 * Power sums by doubling and adding along the bits of N: about log2(N) steps and, unlike the
 * closed form, exact also where w is nearly 1.
 */
export function powerSums(wRe: number, wIm: number, count: number): PowerSums {
	// Sums over the first `done` terms, and w^done.
	let done = 0;
	let pRe = 1;
	let pIm = 0;
	let a = 0;
	let b = 0;
	let c = 0;
	let d = 0;
	let e = 0;
	let f = 0;
	for (let bit = 31 - Math.clz32(count); bit >= 0; bit--) {
		// Double: Σ_{n<2M} = Σ_{n<M} + w^M·Σ_{n<M} (n+M)^k w^n.
		const x1 = c + done * a;
		const y1 = d + done * b;
		const x2 = e + 2 * done * c + done * done * a;
		const y2 = f + 2 * done * d + done * done * b;
		const nextE = e + pRe * x2 - pIm * y2;
		const nextF = f + pRe * y2 + pIm * x2;
		const nextC = c + pRe * x1 - pIm * y1;
		const nextD = d + pRe * y1 + pIm * x1;
		const nextA = a + pRe * a - pIm * b;
		const nextB = b + pRe * b + pIm * a;
		[a, b, c, d, e, f] = [nextA, nextB, nextC, nextD, nextE, nextF];
		const squareRe = pRe * pRe - pIm * pIm;
		pIm = 2 * pRe * pIm;
		pRe = squareRe;
		done *= 2;
		if ((count >> bit) & 1) {
			a += pRe;
			b += pIm;
			c += done * pRe;
			d += done * pIm;
			e += done * done * pRe;
			f += done * done * pIm;
			const stepRe = pRe * wRe - pIm * wIm;
			pIm = pRe * wIm + pIm * wRe;
			pRe = stepRe;
			done++;
		}
	}
	return [a, b, c, d, e, f];
}

/**
 * Correlates a signal with one exponential: Σ conj(p^n)·z_n and Σ n·conj(p^n)·z_n.
 * @param z interleaved complex samples
 */
export function correlate(
	z: Float64Array,
	pRe: number,
	pIm: number
): [re: number, im: number, slopeRe: number, slopeIm: number] {
	const count = z.length / 2;
	let qRe = 1;
	let qIm = 0;
	let re = 0;
	let im = 0;
	let slopeRe = 0;
	let slopeIm = 0;
	for (let n = 0; n < count; n++) {
		const x = qRe * z[2 * n] + qIm * z[2 * n + 1];
		const y = qRe * z[2 * n + 1] - qIm * z[2 * n];
		re += x;
		im += y;
		slopeRe += n * x;
		slopeIm += n * y;
		const next = qRe * pRe - qIm * pIm;
		qIm = qRe * pIm + qIm * pRe;
		qRe = next;
	}
	return [re, im, slopeRe, slopeIm];
}
