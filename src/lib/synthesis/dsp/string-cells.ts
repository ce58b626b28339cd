/**
 * Inner loops of the coupled-string bank. One cell is one partial of one to four strings; a cell's
 * strings lie side by side in the state arrays. Per sample the strings of a cell go through
 *
 *   a ← D·K·a,   D = diag(exp((iω_s − γ)·dt)),   K = exp(−η·dt·1·1ᵀ) = 1 − κ·1·1ᵀ,
 *   κ = (1 − exp(−N·η·dt))/N
 *
 * which is the equation a_s' = (iω_s − γ)·a_s − η·Σ_j a_j (Weinreich 1977, J. Acoust. Soc. Am.
 * 62:1474) split into its two exactly solved parts. D·K has the eigenvalues of the symmetric
 * splitting D½·K·D½ (Strang 1968), and because the common rotation commutes with everything the
 * splitting's error in frequency is of the order dt²·δω²·η/24, δω the mistuning in rad/s: below
 * 0.0002 Hz even a semitone apart at 10 kHz. N + 1 complex multiplications a sample.
 *
 * The functions allocate nothing and keep the state in local variables.
 */

/** State and coefficients shared by the cells of one voice. `stride` strings a cell. */
export interface CellArrays {
	readonly stride: number;
	readonly stateRe: Float64Array;
	readonly stateIm: Float64Array;
	readonly stepRe: Float64Array;
	readonly stepIm: Float64Array;
	readonly couplingRe: Float64Array;
	readonly couplingIm: Float64Array;
}

/** One string on its own: a damped sinusoid. */
export function runOne(
	cells: CellArrays,
	index: number,
	out: Float64Array,
	from: number,
	count: number
): void {
	let re = cells.stateRe[index];
	let im = cells.stateIm[index];
	const dr = cells.stepRe[index];
	const di = cells.stepIm[index];
	const end = from + count;
	for (let t = from; t < end; t += 1) {
		out[t] += re;
		const next = dr * re - di * im;
		im = dr * im + di * re;
		re = next;
	}
	cells.stateRe[index] = re;
	cells.stateIm[index] = im;
}

/** Two coupled strings of one partial, at state positions `a` and `b`. */
export function runTwo(
	cells: CellArrays,
	cell: number,
	a: number,
	b: number,
	out: Float64Array,
	from: number,
	count: number
): void {
	const { stateRe, stateIm, stepRe, stepIm } = cells;
	let ar = stateRe[a];
	let ai = stateIm[a];
	let br = stateRe[b];
	let bi = stateIm[b];
	const adr = stepRe[a];
	const adi = stepIm[a];
	const bdr = stepRe[b];
	const bdi = stepIm[b];
	const kr = cells.couplingRe[cell];
	const ki = cells.couplingIm[cell];
	const end = from + count;
	for (let t = from; t < end; t += 1) {
		const sr = ar + br;
		const si = ai + bi;
		out[t] += sr;
		const cr = kr * sr - ki * si;
		const ci = kr * si + ki * sr;
		let x = ar - cr;
		let y = ai - ci;
		ar = adr * x - adi * y;
		ai = adr * y + adi * x;
		x = br - cr;
		y = bi - ci;
		br = bdr * x - bdi * y;
		bi = bdr * y + bdi * x;
	}
	stateRe[a] = ar;
	stateIm[a] = ai;
	stateRe[b] = br;
	stateIm[b] = bi;
}

/** Three coupled strings of one partial, at state positions `a`, `a + 1` and `a + 2`. */
export function runThree(
	cells: CellArrays,
	cell: number,
	a: number,
	out: Float64Array,
	from: number,
	count: number
): void {
	const { stateRe, stateIm, stepRe, stepIm } = cells;
	let ar = stateRe[a];
	let ai = stateIm[a];
	let br = stateRe[a + 1];
	let bi = stateIm[a + 1];
	let er = stateRe[a + 2];
	let ei = stateIm[a + 2];
	const adr = stepRe[a];
	const adi = stepIm[a];
	const bdr = stepRe[a + 1];
	const bdi = stepIm[a + 1];
	const edr = stepRe[a + 2];
	const edi = stepIm[a + 2];
	const kr = cells.couplingRe[cell];
	const ki = cells.couplingIm[cell];
	const end = from + count;
	for (let t = from; t < end; t += 1) {
		const sr = ar + br + er;
		const si = ai + bi + ei;
		out[t] += sr;
		const cr = kr * sr - ki * si;
		const ci = kr * si + ki * sr;
		let x = ar - cr;
		let y = ai - ci;
		ar = adr * x - adi * y;
		ai = adr * y + adi * x;
		x = br - cr;
		y = bi - ci;
		br = bdr * x - bdi * y;
		bi = bdr * y + bdi * x;
		x = er - cr;
		y = ei - ci;
		er = edr * x - edi * y;
		ei = edr * y + edi * x;
	}
	stateRe[a] = ar;
	stateIm[a] = ai;
	stateRe[a + 1] = br;
	stateIm[a + 1] = bi;
	stateRe[a + 2] = er;
	stateIm[a + 2] = ei;
}
