import { eigenvaluesComplex, multiplyComplex, solveComplex } from './complex-matrix';
import type { Pole } from './refine';

const MAX_ROWS = 90;
const ITERATIONS = 5;

/**
 * Poles of a band by ESPRIT (Roy & Kailath 1989, IEEE Trans. ASSP 37:984) on the Hankel
 * covariance of every `stride`-th sample: a larger stride looks longer and parts slow beats,
 * but folds frequencies beyond rate/(2·stride).
 * @returns `order` poles or none when the band is too short
 */
export function espritPoles(
	z: Float64Array,
	rateHz: number,
	order: number,
	stride: number
): Pole[] {
	const samples = z.length / 2;
	const rows = Math.min(MAX_ROWS, Math.floor(samples / (2 * stride)));
	const width = order + 2;
	if (rows < width + 2) return [];
	const covariance = hankelCovariance(z, samples, rows, stride);
	const basis = dominantSubspace(covariance, rows, width).subarray(0, 2 * rows * width);
	const shift = shiftMatrix(basis, rows, width, order);
	if (!shift) return [];
	const values = eigenvaluesComplex(shift, order);
	return Array.from({ length: order }, (_, k) => {
		const re = values[2 * k];
		const im = values[2 * k + 1];
		return {
			hz: (Math.atan2(im, re) * rateHz) / (2 * Math.PI * stride),
			decayPerSecond: (-Math.log(Math.hypot(re, im) || 1e-9) * rateHz) / stride
		};
	});
}

/** R[i][j] = Σ_n z[n + i·stride]·conj(z[n + j·stride]), diagonal by diagonal. */
function hankelCovariance(
	z: Float64Array,
	samples: number,
	rows: number,
	stride: number
): Float64Array {
	const r = new Float64Array(2 * rows * rows);
	const count = samples - (rows - 1) * stride;
	for (let lag = 0; lag < rows; lag++) {
		let re = 0;
		let im = 0;
		const add = (n: number, sign: number): void => {
			const a = 2 * (n + lag * stride);
			const b = 2 * n;
			re += sign * (z[a] * z[b] + z[a + 1] * z[b + 1]);
			im += sign * (z[a + 1] * z[b] - z[a] * z[b + 1]);
		};
		for (let n = 0; n < count; n++) add(n, 1);
		for (let j = 0; j + lag < rows; j++) {
			const i = j + lag;
			r[2 * (i * rows + j)] = r[2 * (j * rows + i)] = re;
			r[2 * (i * rows + j) + 1] = im;
			r[2 * (j * rows + i) + 1] = -im;
			for (let s = 0; s < stride; s++) {
				add(j * stride + s, -1);
				if (j + lag + 1 < rows) add(j * stride + s + count, 1);
			}
		}
	}
	return r;
}

/** Orthogonal iterations for the strongest `width` eigenvectors (columns, strongest first). */
function dominantSubspace(r: Float64Array, rows: number, width: number): Float64Array {
	let q = new Float64Array(2 * rows * width);
	for (let i = 0; i < rows; i++) {
		for (let k = 0; k < width; k++) {
			// Any start that is not orthogonal to the answer will do; these are slow cosines.
			q[2 * (i * width + k)] = Math.cos((Math.PI * k * (i + 0.5)) / rows);
			q[2 * (i * width + k) + 1] = 0.1 * Math.sin(1 + i * (k + 1));
		}
	}
	orthonormalise(q, rows, width);
	for (let turn = 0; turn < ITERATIONS; turn++) {
		q = multiplyComplex(r, q, rows, rows, width) as Float64Array<ArrayBuffer>;
		orthonormalise(q, rows, width);
	}
	return q;
}

function orthonormalise(q: Float64Array, rows: number, width: number): void {
	for (let k = 0; k < width; k++) {
		for (let l = 0; l < k; l++) {
			let re = 0;
			let im = 0;
			for (let i = 0; i < rows; i++) {
				const a = 2 * (i * width + l);
				const b = 2 * (i * width + k);
				re += q[a] * q[b] + q[a + 1] * q[b + 1];
				im += q[a] * q[b + 1] - q[a + 1] * q[b];
			}
			for (let i = 0; i < rows; i++) {
				const a = 2 * (i * width + l);
				const b = 2 * (i * width + k);
				q[b] -= re * q[a] - im * q[a + 1];
				q[b + 1] -= re * q[a + 1] + im * q[a];
			}
		}
		let norm = 0;
		for (let i = 0; i < rows; i++) {
			const at = 2 * (i * width + k);
			norm += q[at] * q[at] + q[at + 1] * q[at + 1];
		}
		const scale = norm > 0 ? 1 / Math.sqrt(norm) : 0;
		for (let i = 0; i < rows; i++) {
			q[2 * (i * width + k)] *= scale;
			q[2 * (i * width + k) + 1] *= scale;
		}
	}
}

/** Least-squares F with U_lower·F = U_upper, of the first `order` columns. */
function shiftMatrix(
	q: Float64Array,
	rows: number,
	width: number,
	order: number
): Float64Array | null {
	const gram = new Float64Array(2 * order * order);
	const cross = new Float64Array(2 * order * order);
	for (let i = 0; i + 1 < rows; i++) {
		for (let k = 0; k < order; k++) {
			const a = 2 * (i * width + k);
			for (let l = 0; l < order; l++) {
				const b = 2 * (i * width + l);
				const c = 2 * ((i + 1) * width + l);
				const to = 2 * (k * order + l);
				gram[to] += q[a] * q[b] + q[a + 1] * q[b + 1];
				gram[to + 1] += q[a] * q[b + 1] - q[a + 1] * q[b];
				cross[to] += q[a] * q[c] + q[a + 1] * q[c + 1];
				cross[to + 1] += q[a] * q[c + 1] - q[a + 1] * q[c];
			}
		}
	}
	return solveComplex(gram, cross, order, order);
}
