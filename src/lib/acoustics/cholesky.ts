/**
 * Cholesky factor of a symmetric positive definite matrix, in place: the lower triangle of
 * `matrix` (row by row, `size` × `size`) becomes L with A = L·Lᵀ.
 * Throws RangeError when the matrix is not positive definite.
 */
export function factorInPlace(matrix: Float64Array, size: number): void {
	for (let column = 0; column < size; column += 1) {
		const columnRow = column * size;
		let pivot = matrix[columnRow + column];
		for (let k = 0; k < column; k += 1) pivot -= matrix[columnRow + k] ** 2;
		if (!(pivot > 0)) throw new RangeError('matrix is not positive definite');
		const root = Math.sqrt(pivot);
		matrix[columnRow + column] = root;
		for (let row = column + 1; row < size; row += 1) {
			const at = row * size;
			let sum = matrix[at + column];
			for (let k = 0; k < column; k += 1) sum -= matrix[at + k] * matrix[columnRow + k];
			matrix[at + column] = sum / root;
		}
	}
}

/** Solution of L·Lᵀ·x = b for a factor made by {@link factorInPlace}; b is left as it is. */
export function solveFactored(factor: Float64Array, size: number, b: Float64Array): Float64Array {
	const x = Float64Array.from(b);
	for (let row = 0; row < size; row += 1) {
		let sum = x[row];
		for (let k = 0; k < row; k += 1) sum -= factor[row * size + k] * x[k];
		x[row] = sum / factor[row * size + row];
	}
	for (let row = size - 1; row >= 0; row -= 1) {
		let sum = x[row];
		for (let k = row + 1; k < size; k += 1) sum -= factor[k * size + row] * x[k];
		x[row] = sum / factor[row * size + row];
	}
	return x;
}
