/**
 * Small dense complex matrices, row by row, re and im interleaved: entry (i, j) of an n × n
 * matrix stands at 2·(i·n + j).
 */
export type ComplexMatrix = Float64Array;

/**
 * Solves A·X = B by Gaussian elimination with partial pivoting.
 * @param a n × n, left unchanged
 * @param b n × m, left unchanged
 * @returns X (n × m), or null when A is singular to working precision
 */
export function solveComplex(
	a: ComplexMatrix,
	b: ComplexMatrix,
	n: number,
	m: number
): ComplexMatrix | null {
	const left = Float64Array.from(a);
	const right = Float64Array.from(b);
	for (let k = 0; k < n; k++) {
		const pivot = pivotRow(left, n, k);
		if (pivot < 0) return null;
		if (pivot !== k) {
			swapRows(left, n, k, pivot);
			swapRows(right, m, k, pivot);
		}
		eliminate(left, right, n, m, k);
	}
	for (let i = 0; i < n; i++)
		scaleRow(right, m, i, left[2 * (i * n + i)], left[2 * (i * n + i) + 1]);
	return right;
}

function pivotRow(a: ComplexMatrix, n: number, k: number): number {
	let best = -1;
	let size = 1e-300;
	for (let i = k; i < n; i++) {
		const at = 2 * (i * n + k);
		const magnitude = a[at] * a[at] + a[at + 1] * a[at + 1];
		if (magnitude > size) {
			size = magnitude;
			best = i;
		}
	}
	return best;
}

function swapRows(a: ComplexMatrix, width: number, i: number, j: number): void {
	for (let c = 0; c < 2 * width; c++) {
		const kept = a[2 * i * width + c];
		a[2 * i * width + c] = a[2 * j * width + c];
		a[2 * j * width + c] = kept;
	}
}

function eliminate(a: ComplexMatrix, b: ComplexMatrix, n: number, m: number, k: number): void {
	const at = 2 * (k * n + k);
	const norm = a[at] * a[at] + a[at + 1] * a[at + 1];
	for (let i = 0; i < n; i++) {
		if (i === k) continue;
		const re = a[2 * (i * n + k)];
		const im = a[2 * (i * n + k) + 1];
		if (re === 0 && im === 0) continue;
		const fRe = (re * a[at] + im * a[at + 1]) / norm;
		const fIm = (im * a[at] - re * a[at + 1]) / norm;
		subtractRow(a, n, i, k, fRe, fIm);
		subtractRow(b, m, i, k, fRe, fIm);
	}
}

function subtractRow(
	a: ComplexMatrix,
	width: number,
	i: number,
	k: number,
	fRe: number,
	fIm: number
): void {
	for (let c = 0; c < width; c++) {
		const to = 2 * (i * width + c);
		const from = 2 * (k * width + c);
		a[to] -= fRe * a[from] - fIm * a[from + 1];
		a[to + 1] -= fRe * a[from + 1] + fIm * a[from];
	}
}

function scaleRow(a: ComplexMatrix, width: number, i: number, re: number, im: number): void {
	const norm = re * re + im * im;
	for (let c = 0; c < width; c++) {
		const at = 2 * (i * width + c);
		const x = a[at];
		const y = a[at + 1];
		a[at] = (x * re + y * im) / norm;
		a[at + 1] = (y * re - x * im) / norm;
	}
}

/** Inverse of an n × n matrix, or null when singular. */
export function invertComplex(a: ComplexMatrix, n: number): ComplexMatrix | null {
	const identity = new Float64Array(2 * n * n);
	for (let i = 0; i < n; i++) identity[2 * (i * n + i)] = 1;
	return solveComplex(a, identity, n, n);
}

/** C = A·B with A n × k and B k × m. */
export function multiplyComplex(
	a: ComplexMatrix,
	b: ComplexMatrix,
	n: number,
	k: number,
	m: number
): ComplexMatrix {
	const out = new Float64Array(2 * n * m);
	for (let i = 0; i < n; i++) {
		for (let l = 0; l < k; l++) {
			const re = a[2 * (i * k + l)];
			const im = a[2 * (i * k + l) + 1];
			for (let j = 0; j < m; j++) {
				const from = 2 * (l * m + j);
				const to = 2 * (i * m + j);
				out[to] += re * b[from] - im * b[from + 1];
				out[to + 1] += re * b[from + 1] + im * b[from];
			}
		}
	}
	return out;
}

/**
 * Eigenvalues of a general n × n complex matrix (n up to about 10) by the shifted QR method
 * with Givens rotations on the Hessenberg form (Golub & Van Loan, Matrix Computations, §7.5).
 * @returns interleaved eigenvalues in no particular order
 */
export function eigenvaluesComplex(matrix: ComplexMatrix, n: number): Float64Array {
	const h = toHessenberg(Float64Array.from(matrix), n);
	const values = new Float64Array(2 * n);
	let high = n - 1;
	let turns = 0;
	while (high >= 0) {
		const low = activeStart(h, n, high);
		if (low === high || turns > 60) {
			values[2 * high] = h[2 * (high * n + high)];
			values[2 * high + 1] = h[2 * (high * n + high) + 1];
			high--;
			turns = 0;
			continue;
		}
		turns++;
		const [re, im] = turns % 12 === 11 ? [h[2 * (high * n + high - 1)], 0] : wilkinson(h, n, high);
		qrStep(h, n, low, high, re, im);
	}
	return values;
}

function toHessenberg(a: ComplexMatrix, n: number): ComplexMatrix {
	for (let k = 1; k < n - 1; k++) {
		let pivot = k;
		let size = 0;
		for (let i = k; i < n; i++) {
			const at = 2 * (i * n + k - 1);
			const magnitude = Math.abs(a[at]) + Math.abs(a[at + 1]);
			if (magnitude > size) {
				size = magnitude;
				pivot = i;
			}
		}
		if (size === 0) continue;
		if (pivot !== k) {
			swapRows(a, n, k, pivot);
			swapColumns(a, n, k, pivot);
		}
		for (let i = k + 1; i < n; i++) reduceRow(a, n, i, k);
	}
	return a;
}

function swapColumns(a: ComplexMatrix, n: number, i: number, j: number): void {
	for (let r = 0; r < n; r++) {
		for (let c = 0; c < 2; c++) {
			const kept = a[2 * (r * n + i) + c];
			a[2 * (r * n + i) + c] = a[2 * (r * n + j) + c];
			a[2 * (r * n + j) + c] = kept;
		}
	}
}

function reduceRow(a: ComplexMatrix, n: number, i: number, k: number): void {
	const at = 2 * (k * n + k - 1);
	const norm = a[at] * a[at] + a[at + 1] * a[at + 1];
	const re = a[2 * (i * n + k - 1)];
	const im = a[2 * (i * n + k - 1) + 1];
	if (re === 0 && im === 0) return;
	const fRe = (re * a[at] + im * a[at + 1]) / norm;
	const fIm = (im * a[at] - re * a[at + 1]) / norm;
	subtractRow(a, n, i, k, fRe, fIm);
	for (let r = 0; r < n; r++) {
		const from = 2 * (r * n + i);
		const to = 2 * (r * n + k);
		a[to] += fRe * a[from] - fIm * a[from + 1];
		a[to + 1] += fRe * a[from + 1] + fIm * a[from];
	}
}

function activeStart(h: ComplexMatrix, n: number, high: number): number {
	for (let l = high; l > 0; l--) {
		const below = 2 * (l * n + l - 1);
		const up = 2 * ((l - 1) * n + l - 1);
		const here = 2 * (l * n + l);
		const scale = Math.hypot(h[up], h[up + 1]) + Math.hypot(h[here], h[here + 1]);
		if (Math.hypot(h[below], h[below + 1]) <= 1e-15 * (scale || 1)) {
			h[below] = 0;
			h[below + 1] = 0;
			return l;
		}
	}
	return 0;
}

/** The eigenvalue of the trailing 2 × 2 block that is nearer to its last entry. */
function wilkinson(h: ComplexMatrix, n: number, high: number): [number, number] {
	const p = 2 * ((high - 1) * n + high - 1);
	const q = p + 2;
	const r = 2 * (high * n + high - 1);
	const s = r + 2;
	const halfRe = (h[p] - h[s]) / 2;
	const halfIm = (h[p + 1] - h[s + 1]) / 2;
	const bcRe = h[q] * h[r] - h[q + 1] * h[r + 1];
	const bcIm = h[q] * h[r + 1] + h[q + 1] * h[r];
	const dRe = halfRe * halfRe - halfIm * halfIm + bcRe;
	const dIm = 2 * halfRe * halfIm + bcIm;
	const size = Math.hypot(dRe, dIm);
	let rootRe = Math.sqrt((size + dRe) / 2);
	let rootIm = Math.sign(dIm || 1) * Math.sqrt(Math.max(0, (size - dRe) / 2));
	if (halfRe * rootRe + halfIm * rootIm > 0) {
		rootRe = -rootRe;
		rootIm = -rootIm;
	}
	return [h[s] + halfRe + rootRe, h[s + 1] + halfIm + rootIm];
}

function qrStep(
	h: ComplexMatrix,
	n: number,
	low: number,
	high: number,
	shiftRe: number,
	shiftIm: number
): void {
	for (let i = low; i <= high; i++) {
		h[2 * (i * n + i)] -= shiftRe;
		h[2 * (i * n + i) + 1] -= shiftIm;
	}
	const rotations: [number, number, number][] = [];
	for (let k = low; k < high; k++) {
		const a = 2 * (k * n + k);
		const b = 2 * ((k + 1) * n + k);
		const sizeA = Math.hypot(h[a], h[a + 1]);
		const sizeB = Math.hypot(h[b], h[b + 1]);
		const norm = Math.hypot(sizeA, sizeB) || 1;
		// c real, s complex: [c, s; -conj(s), c] takes (a, b) to (·, 0).
		const c = sizeA / norm;
		const [uRe, uIm] = sizeA > 0 ? [h[a] / sizeA, h[a + 1] / sizeA] : [1, 0];
		const sRe = (uRe * h[b] + uIm * h[b + 1]) / norm;
		const sIm = (uIm * h[b] - uRe * h[b + 1]) / norm;
		rotations.push([c, sRe, sIm]);
		for (let j = k; j <= high; j++) rotate(h, 2 * (k * n + j), 2 * ((k + 1) * n + j), c, sRe, sIm);
	}
	rotations.forEach(([c, sRe, sIm], index) => {
		const k = low + index;
		const end = Math.min(k + 2, high);
		for (let i = low; i <= end; i++) rotate(h, 2 * (i * n + k), 2 * (i * n + k + 1), c, sRe, -sIm);
	});
	for (let i = low; i <= high; i++) {
		h[2 * (i * n + i)] += shiftRe;
		h[2 * (i * n + i) + 1] += shiftIm;
	}
}

/** (x, y) becomes (c·x + s·y, -conj(s)·x + c·y). */
function rotate(h: ComplexMatrix, x: number, y: number, c: number, sRe: number, sIm: number): void {
	const xRe = h[x];
	const xIm = h[x + 1];
	const yRe = h[y];
	const yIm = h[y + 1];
	h[x] = c * xRe + sRe * yRe - sIm * yIm;
	h[x + 1] = c * xIm + sRe * yIm + sIm * yRe;
	h[y] = c * yRe - (sRe * xRe + sIm * xIm);
	h[y + 1] = c * yIm - (sRe * xIm - sIm * xRe);
}
