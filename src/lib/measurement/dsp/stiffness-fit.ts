import { partialOf, nearestPeak, type Stiffness } from './comb';
import { medianOf } from './residual';
import type { SpectralPeak } from './spectrum';

/** One partial's place in the spectrum. */
export interface PartialReading {
	n: number;
	frequencyHz: number;
	levelDb: number;
}

/** f0 and B with their standard deviations. */
export interface StiffnessFit extends Stiffness {
	f1Hz: number;
	/** Standard deviation of f_1 in hertz. */
	f1Sd: number;
	/** Standard deviation of B. */
	inharmonicitySd: number;
	readings: PartialReading[];
}

/**
 * Partials of a comb among the peaks: the strongest peak within reach of each place.
 * @param skip partials to leave out (those that meet another note's)
 */
export function readPartials(
	peaks: readonly SpectralPeak[],
	string: Stiffness,
	maxPartials: number,
	highestHz: number,
	skip: (n: number, hz: number) => boolean = () => false
): PartialReading[] {
	const readings: PartialReading[] = [];
	for (let n = 1; n <= maxPartials; n++) {
		const hz = partialOf(string, n);
		if (hz > highestHz) break;
		if (skip(n, hz)) continue;
		const reach = Math.min(0.25 * string.f0Hz, Math.max(1.5, 4e-3 * hz));
		let best: SpectralPeak | null = null;
		for (let i = Math.max(0, nearestPeak(peaks, hz - reach)); i < peaks.length; i++) {
			const peak = peaks[i];
			if (peak.frequencyHz > hz + reach) break;
			if (peak.frequencyHz < hz - reach) continue;
			if (!best || peak.levelDb > best.levelDb) best = peak;
		}
		if (best) readings.push({ n, frequencyHz: best.frequencyHz, levelDb: best.levelDb });
	}
	return readings;
}

interface Line {
	/** f0² and f0²·B. */
	a: number;
	b: number;
	varianceA: number;
	varianceB: number;
	covariance: number;
}

/** Weighted line y = a + b·x. */
function fitLine(x: number[], y: number[], weight: number[]): Line | null {
	let s = 0;
	let sx = 0;
	let sy = 0;
	let sxx = 0;
	let sxy = 0;
	x.forEach((value, i) => {
		s += weight[i];
		sx += weight[i] * value;
		sy += weight[i] * y[i];
		sxx += weight[i] * value * value;
		sxy += weight[i] * value * y[i];
	});
	const det = s * sxx - sx * sx;
	if (!(det > 1e-9 * s * sxx)) return null;
	return {
		a: (sxx * sy - sx * sxy) / det,
		b: (s * sxy - sx * sy) / det,
		varianceA: sxx / det,
		varianceB: s / det,
		covariance: -sx / det
	};
}

/**
 * Robust weighted regression (f_n/n)² = f0² + f0²·B·n² with Huber weights. A reading's standard
 * deviation starts at hypot(0.1 Hz, 1e-4·f): several strings per note pull the peaks about.
 * @returns null when fewer than three partials were read
 */
export function fitStiffness(readings: PartialReading[]): StiffnessFit | null {
	if (readings.length < 3) return null;
	const x = readings.map(({ n }) => n * n);
	const y = readings.map(({ n, frequencyHz }) => (frequencyHz / n) ** 2);
	const sigma = readings.map(
		({ n, frequencyHz }) => (2 * frequencyHz * Math.hypot(0.1, 1e-4 * frequencyHz)) / (n * n)
	);
	let huber = readings.map(() => 1);
	let line: Line | null = null;
	let scale = 1;
	for (let turn = 0; turn < 12; turn++) {
		line = fitLine(
			x,
			y,
			huber.map((h, i) => h / (sigma[i] * sigma[i]))
		);
		if (!line) return null;
		const { a, b } = line;
		const errors = y.map((value, i) => (value - a - b * x[i]) / sigma[i]);
		scale = Math.max(0.15, 1.4826 * medianOf(errors.map(Math.abs)));
		// Far off means another sound altogether: out, not merely down.
		huber = errors.map((e) => {
			const size = Math.abs(e) / scale;
			return size > 6 ? 0 : size <= 1.3 ? 1 : 1.3 / size;
		});
	}
	return line && toStiffness(line, scale, readings, huber);
}

function toStiffness(
	line: Line,
	scale: number,
	all: PartialReading[],
	huber: number[]
): StiffnessFit | null {
	if (!(line.a > 0)) return null;
	const kept = all.filter((_, i) => huber[i] > 0);
	if (kept.length < 3) return null;
	const f0Hz = Math.sqrt(line.a);
	const inharmonicity = Math.max(0, line.b / line.a);
	const f1Hz = f0Hz * Math.sqrt(1 + inharmonicity);
	// A small sample's scale is itself uncertain: Student's factor in place of it.
	const widen = scale * (1 + 2 / (kept.length - 1));
	const varianceF1 = line.varianceA + 2 * line.covariance + line.varianceB;
	const varianceB =
		line.varianceB / line.a ** 2 -
		(2 * line.b * line.covariance) / line.a ** 3 +
		(line.b ** 2 * line.varianceA) / line.a ** 4;
	return {
		f0Hz,
		inharmonicity,
		f1Hz,
		f1Sd: (widen * Math.sqrt(Math.max(0, varianceF1))) / (2 * f1Hz),
		inharmonicitySd: widen * Math.sqrt(Math.max(0, varianceB)),
		readings: kept
	};
}
