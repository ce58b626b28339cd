/** A complex number. */
export interface Complex {
	readonly re: number;
	readonly im: number;
}

export const add = (a: Complex, b: Complex): Complex => ({ re: a.re + b.re, im: a.im + b.im });
export const subtract = (a: Complex, b: Complex): Complex => ({ re: a.re - b.re, im: a.im - b.im });
export const multiply = (a: Complex, b: Complex): Complex => ({
	re: a.re * b.re - a.im * b.im,
	im: a.re * b.im + a.im * b.re
});
export const scale = (a: Complex, factor: number): Complex => ({
	re: a.re * factor,
	im: a.im * factor
});
export const magnitude = (a: Complex): number => Math.hypot(a.re, a.im);

/** a / b; not finite when b is 0. */
export function divide(a: Complex, b: Complex): Complex {
	const square = b.re * b.re + b.im * b.im;
	return {
		re: (a.re * b.re + a.im * b.im) / square,
		im: (a.im * b.re - a.re * b.im) / square
	};
}

/** Principal square root: real part 0 or above. */
function squareRoot(a: Complex): Complex {
	const size = magnitude(a);
	if (size === 0) return { re: 0, im: 0 };
	const re = Math.sqrt((size + Math.abs(a.re)) / 2);
	const im = Math.abs(a.im) / (2 * re);
	const sign = a.im < 0 ? -1 : 1;
	return a.re >= 0 ? { re, im: sign * im } : { re: im, im: sign * re };
}

/** Value of the monic polynomial z^n + c[n-1]·z^(n-1) + … + c[0] at z. */
function monicValue(coefficients: readonly Complex[], z: Complex): Complex {
	let value: Complex = { re: 1, im: 0 };
	for (let k = coefficients.length - 1; k >= 0; k -= 1) {
		value = add(multiply(value, z), coefficients[k]);
	}
	return value;
}

function quadraticRoots([c0, c1]: readonly Complex[]): Complex[] {
	const half = scale(c1, -0.5);
	const root = squareRoot(subtract(multiply(half, half), c0));
	// Add on the side where nothing cancels, take the other root from the product.
	const plus = add(half, root);
	const minus = subtract(half, root);
	const large = magnitude(plus) >= magnitude(minus) ? plus : minus;
	if (magnitude(large) === 0) return [large, large];
	return [large, divide(c0, large)];
}

/**
 * All roots of a monic polynomial of degree 1 to 3 with complex coefficients, `coefficients`
 * from the constant upwards without the leading 1. Degrees 1 and 2 in closed form, degree 3 by
 * simultaneous iteration (Weierstrass 1891, Durand 1960, Kerner 1966).
 */
export function polynomialRoots(coefficients: readonly Complex[]): Complex[] {
	if (coefficients.length === 1) return [scale(coefficients[0], -1)];
	if (coefficients.length === 2) return quadraticRoots(coefficients);
	const size = Math.max(
		...coefficients.map((c, k) => magnitude(c) ** (1 / (coefficients.length - k)))
	);
	if (size === 0) return coefficients.map(() => ({ re: 0, im: 0 }));
	let roots = coefficients.map((_, k) => ({
		re: size * Math.cos(0.7 + (2 * Math.PI * k) / coefficients.length),
		im: size * Math.sin(0.7 + (2 * Math.PI * k) / coefficients.length)
	}));
	for (let round = 0; round < 200; round += 1) {
		let moved = 0;
		roots = roots.map((root, k) => {
			let product: Complex = { re: 1, im: 0 };
			roots.forEach((other, j) => {
				if (j !== k) product = multiply(product, subtract(root, other));
			});
			if (magnitude(product) === 0) return root;
			const step = divide(monicValue(coefficients, root), product);
			moved = Math.max(moved, magnitude(step));
			return subtract(root, step);
		});
		if (moved < 1e-15 * size) break;
	}
	return roots;
}
