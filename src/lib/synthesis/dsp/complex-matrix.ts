/** Square complex matrix: rows one after another, real and imaginary parts apart. */
export interface ComplexMatrix {
	readonly size: number;
	readonly re: Float64Array;
	readonly im: Float64Array;
}

export function complexMatrix(size: number): ComplexMatrix {
	return { size, re: new Float64Array(size * size), im: new Float64Array(size * size) };
}

function multiply(a: ComplexMatrix, b: ComplexMatrix): ComplexMatrix {
	const product = complexMatrix(a.size);
	for (let i = 0; i < a.size; i += 1) {
		for (let j = 0; j < a.size; j += 1) {
			let re = 0;
			let im = 0;
			for (let k = 0; k < a.size; k += 1) {
				const x = i * a.size + k;
				const y = k * a.size + j;
				re += a.re[x] * b.re[y] - a.im[x] * b.im[y];
				im += a.re[x] * b.im[y] + a.im[x] * b.re[y];
			}
			product.re[i * a.size + j] = re;
			product.im[i * a.size + j] = im;
		}
	}
	return product;
}

/**
 * exp(M) by scaling and squaring of its Taylor series (Moler & Van Loan 2003, SIAM Rev. 45:3,
 * method 3): exact to rounding also where two eigenvalues meet, at the edge of locking, where an
 * eigenvector basis does not exist. For small matrices.
 */
export function matrixExponential(m: ComplexMatrix): ComplexMatrix {
	let norm = 0;
	for (let i = 0; i < m.re.length; i += 1) norm += Math.abs(m.re[i]) + Math.abs(m.im[i]);
	const halvings = Math.max(0, Math.ceil(Math.log2(norm || 1)) + 4);
	const scaled = complexMatrix(m.size);
	for (let i = 0; i < m.re.length; i += 1) {
		scaled.re[i] = m.re[i] / 2 ** halvings;
		scaled.im[i] = m.im[i] / 2 ** halvings;
	}
	let sum = complexMatrix(m.size);
	for (let i = 0; i < m.size; i += 1) sum.re[i * m.size + i] = 1;
	let term = sum;
	for (let order = 1; order <= 14; order += 1) {
		term = multiply(term, scaled);
		const next = complexMatrix(m.size);
		for (let i = 0; i < m.re.length; i += 1) {
			term.re[i] /= order;
			term.im[i] /= order;
			next.re[i] = sum.re[i] + term.re[i];
			next.im[i] = sum.im[i] + term.im[i];
		}
		sum = next;
	}
	for (let i = 0; i < halvings; i += 1) sum = multiply(sum, sum);
	return sum;
}
