/**
 * Measuring method for this room's tests, independent of the kernels: one band is brought down to
 * zero frequency, filtered and thinned out, and the poles of the damped sinusoids in it are found
 * by least-squares linear prediction (Prony's method). A finite filter passes damped sinusoids
 * exactly, so on clean renders the answer is as exact as the samples.
 */
export interface FittedPole {
	frequencyHz: number;
	/** Amplitude decay, 1/s. */
	decayPerSecond: number;
}

interface ComplexList {
	re: Float64Array;
	im: Float64Array;
}

/** Modified Bessel function I0 by its power series, for the Kaiser window. */
function besselI0(x: number): number {
	let sum = 1;
	let term = 1;
	for (let k = 1; k < 60; k += 1) {
		term *= (x / (2 * k)) ** 2;
		sum += term;
	}
	return sum;
}

/** Kaiser window of about 140 dB stop band (β = 15). */
function kaiser(length: number): Float64Array {
	const beta = 15;
	const norm = besselI0(beta);
	return Float64Array.from({ length }, (_, k) => {
		const x = (2 * (k + 0.5)) / length - 1;
		return besselI0(beta * Math.sqrt(1 - x * x)) / norm;
	});
}

/**
 * Complex envelope of the band around `centreHz`, at `rateHz`.
 * @param windowSeconds length of the filter; its stop band begins about 5/windowSeconds away
 */
export function bandEnvelope(
	samples: ArrayLike<number>,
	sampleRateHz: number,
	centreHz: number,
	options: { fromSeconds: number; toSeconds: number; windowSeconds: number; rateHz: number }
): ComplexList {
	const window = kaiser(Math.round(options.windowSeconds * sampleRateHz));
	const hop = sampleRateHz / options.rateHz;
	if (!Number.isInteger(hop)) throw new Error('the thinned rate must divide the sample rate');
	const turn = (2 * Math.PI * centreHz) / sampleRateHz;
	const filterRe = window.map((w, k) => w * Math.cos(turn * k));
	const filterIm = window.map((w, k) => -w * Math.sin(turn * k));
	const first = Math.round(options.fromSeconds * sampleRateHz);
	const last = Math.min(samples.length, Math.round(options.toSeconds * sampleRateHz));
	const count = Math.floor((last - window.length - first) / hop);
	const re = new Float64Array(count);
	const im = new Float64Array(count);
	for (let m = 0; m < count; m += 1) {
		const start = first + m * hop;
		let x = 0;
		let y = 0;
		for (let k = 0; k < window.length; k += 1) {
			x += filterRe[k] * samples[start + k];
			y += filterIm[k] * samples[start + k];
		}
		const back = turn * start;
		re[m] = x * Math.cos(back) + y * Math.sin(back);
		im[m] = y * Math.cos(back) - x * Math.sin(back);
	}
	return { re, im };
}

/** Complex numbers as [re, im]. */
type C = readonly [number, number];
const mul = (a: C, b: C): C => [a[0] * b[0] - a[1] * b[1], a[0] * b[1] + a[1] * b[0]];
const sub = (a: C, b: C): C => [a[0] - b[0], a[1] - b[1]];
const div = (a: C, b: C): C => {
	const d = b[0] * b[0] + b[1] * b[1];
	return [(a[0] * b[0] + a[1] * b[1]) / d, (a[1] * b[0] - a[0] * b[1]) / d];
};

/** Least squares of complex columns onto a target by modified Gram–Schmidt. */
function leastSquares(columns: C[][], target: C[]): C[] {
	const order = columns.length;
	const q = columns.map((column) => [...column]);
	const r: C[][] = columns.map(() => columns.map(() => [0, 0] as C));
	const projected: C[] = [];
	let rest = [...target];
	const dot = (a: C[], b: C[]): C =>
		a.reduce<C>(
			(sum, x, t) => {
				const y = mul([x[0], -x[1]], b[t]);
				return [sum[0] + y[0], sum[1] + y[1]];
			},
			[0, 0]
		);
	for (let k = 0; k < order; k += 1) {
		const size = Math.sqrt(dot(q[k], q[k])[0]);
		r[k][k] = [size, 0];
		q[k] = q[k].map((x) => [x[0] / size, x[1] / size] as C);
		for (let j = k + 1; j < order; j += 1) {
			r[k][j] = dot(q[k], q[j]);
			q[j] = q[j].map((x, t) => sub(x, mul(r[k][j], q[k][t])));
		}
		const share = dot(q[k], rest);
		projected.push(share);
		rest = rest.map((x, t) => sub(x, mul(share, q[k][t])));
	}
	const solution: C[] = Array.from({ length: order }, () => [0, 0]);
	for (let k = order - 1; k >= 0; k -= 1) {
		let value = projected[k];
		for (let j = k + 1; j < order; j += 1) value = sub(value, mul(r[k][j], solution[j]));
		solution[k] = div(value, r[k][k]);
	}
	return solution;
}

/** Roots of z^K = c_0·z^(K−1) + … + c_(K−1) by simultaneous iteration (Durand 1960, Kerner 1966). */
function predictionRoots(coefficients: C[]): C[] {
	const order = coefficients.length;
	let roots: C[] = Array.from({ length: order }, (_, k) => [
		0.9 * Math.cos(0.4 + 2.1 * k),
		0.9 * Math.sin(0.4 + 2.1 * k)
	]);
	const value = (z: C): C => coefficients.reduce<C>((power, c) => sub(mul(power, z), c), [1, 0]);
	for (let round = 0; round < 500; round += 1) {
		roots = roots.map((z, k) => {
			let denominator: C = [1, 0];
			roots.forEach((other, j) => {
				if (j !== k) denominator = mul(denominator, sub(z, other));
			});
			return sub(z, div(value(z), denominator));
		});
	}
	return roots;
}

/**
 * The `order` damped sinusoids in a band, slowest frequency first.
 */
export function fitPoles(
	samples: ArrayLike<number>,
	sampleRateHz: number,
	centreHz: number,
	order: number,
	options: { fromSeconds: number; toSeconds: number; windowSeconds: number; rateHz: number }
): FittedPole[] {
	const band = bandEnvelope(samples, sampleRateHz, centreHz, options);
	const at = (t: number): C => [band.re[t], band.im[t]];
	const rows = band.re.length - order;
	const target = Array.from({ length: rows }, (_, t) => at(t + order));
	const columns = Array.from({ length: order }, (_, k) =>
		Array.from({ length: rows }, (_, t) => at(t + order - 1 - k))
	);
	return predictionRoots(leastSquares(columns, target))
		.map(([re, im]) => ({
			frequencyHz: centreHz + (Math.atan2(im, re) * options.rateHz) / (2 * Math.PI),
			decayPerSecond: -Math.log(Math.hypot(re, im)) * options.rateHz
		}))
		.sort((a, b) => a.frequencyHz - b.frequencyHz);
}
