/** Figures as the page writes them: no more digits than the measurement has. */

/** Beats per second: two decimals below 10, one above; "about" figures one digit less. */
export function rateFigure(hz: number, about = false): string {
	const decimals = (hz < 10 ? 2 : 1) - (about ? 1 : 0);
	return hz.toFixed(decimals);
}

/** A frequency in whole hertz with its thousands set off. */
export function wholeHz(hz: number): string {
	return Math.round(hz).toLocaleString('en-GB');
}

/** A distance in cents with its side in words, for instance "1.3 cents above". */
export function centsFrom(cents: number): string {
	const figure = Math.abs(cents).toFixed(1);
	if (figure === '0.0') return '0.0 cents from';
	return `${figure} cents ${cents > 0 ? 'above' : 'below'}`;
}

/**
 * Inharmonicity, a small dimensionless number, to the digit in which it is uncertain (at most five
 * significant ones); two significant digits when the uncertainty is not known.
 */
export function stiffnessFigure(b: number, halfWidth = 0): string {
	if (!(b > 0)) return '0';
	const first = -Math.floor(Math.log10(b));
	const doubt = halfWidth > 0 ? -Math.floor(Math.log10(halfWidth)) : first + 1;
	return b.toFixed(Math.min(first + 4, Math.max(first + 1, doubt)));
}

const ORDINALS = ['th', 'st', 'nd', 'rd'];

/** 1st, 2nd, 3rd, 4th, 11th, 12th … */
export function ordinal(n: number): string {
	const tens = n % 100;
	const ending = tens >= 11 && tens <= 13 ? 'th' : (ORDINALS[n % 10] ?? 'th');
	return `${n}${ending}`;
}
