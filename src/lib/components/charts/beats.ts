/**
 * Where the beats of a shoreline stand, and how two shores are tied together beat by beat.
 */
import { levelAt, type Shore } from './shore';

/** Above this rate (beats per second) moorings would crowd: a rule with graduations replaces them. */
export const MOORING_LIMIT_HZ = 4;

/** Before this a dip belongs to the blow, not to a beat. */
const AFTER_BLOW_S = 0.05;

/**
 * Times in seconds at which a shore of known beat rate is quietest. The level is freed of its decay
 * by a straight line, the phase of the beat is read by correlation with one cycle at the rate, and
 * each time is then moved to the lowest level within a quarter of a period.
 *
 * @param shore loudness over time
 * @param beatRateHz beats per second; 0 or less gives no beats
 * @param seconds length of the time axis
 */
export function quietestTimes(shore: Shore, beatRateHz: number, seconds: number): number[] {
	const count = Math.min(shore.timesS.length, shore.levelDb.length);
	if (!(beatRateHz > 0) || count < 8) return [];
	const endS = Math.min(seconds, shore.timesS[count - 1]);
	const period = 1 / beatRateHz;
	const first = firstQuietTime(shore, beatRateHz, endS);
	const times: number[] = [];
	for (let timeS = first; timeS <= endS; timeS += period) {
		const refined = lowestWithin(shore, timeS, period / 4, endS);
		if (refined > AFTER_BLOW_S) times.push(refined);
	}
	return times;
}

function firstQuietTime(shore: Shore, rateHz: number, endS: number): number {
	const samples = 2000;
	const startS = Math.min(AFTER_BLOW_S, endS / 2);
	const times = Array.from({ length: samples }, (_, k) => startS + ((endS - startS) * k) / samples);
	const levels = times.map((timeS) => Math.max(-120, levelAt(shore, timeS)));
	const flat = withoutSlope(times, levels);
	let re = 0;
	let im = 0;
	times.forEach((timeS, k) => {
		const angle = 2 * Math.PI * rateHz * timeS;
		re += flat[k] * Math.cos(angle);
		im += flat[k] * Math.sin(angle);
	});
	// flat ≈ cos(2πft − φ), lowest where 2πft = φ + π
	const phase = Math.atan2(im, re);
	const turns = ((phase + Math.PI) / (2 * Math.PI)) % 1;
	return (turns < 0 ? turns + 1 : turns) / rateHz;
}

/** Residuals of a least-squares straight line. */
function withoutSlope(times: readonly number[], levels: readonly number[]): number[] {
	const n = times.length;
	const meanT = times.reduce((sum, t) => sum + t, 0) / n;
	const meanL = levels.reduce((sum, l) => sum + l, 0) / n;
	let above = 0;
	let below = 0;
	times.forEach((t, k) => {
		above += (t - meanT) * (levels[k] - meanL);
		below += (t - meanT) ** 2;
	});
	const slope = below > 0 ? above / below : 0;
	return times.map((t, k) => levels[k] - meanL - slope * (t - meanT));
}

function lowestWithin(shore: Shore, timeS: number, reachS: number, endS: number): number {
	let best = timeS;
	let lowest = Infinity;
	const steps = 60;
	for (let k = -steps; k <= steps; k++) {
		const candidate = timeS + (reachS * k) / steps;
		if (candidate < 0 || candidate > endS) continue;
		// A slight lean to the expected place: on a flat stretch the beat stays where its rate puts it.
		const level = levelAt(shore, candidate) + 0.2 * Math.abs(k / steps);
		if (level < lowest) {
			lowest = level;
			best = candidate;
		}
	}
	return best;
}

/** Mean rate of beats from their times, in beats per second; 0 for fewer than two. */
export function rateFromBeats(beatsS: readonly number[]): number {
	if (beatsS.length < 2) return 0;
	const span = beatsS[beatsS.length - 1] - beatsS[0];
	return span > 0 ? (beatsS.length - 1) / span : 0;
}

/** Whether two shores are tied by moorings (false) or by a graduated rule (true). */
export function needsRule(yours: readonly number[], target: readonly number[]): boolean {
	return Math.max(rateFromBeats(yours), rateFromBeats(target)) > MOORING_LIMIT_HZ;
}

export interface Graduation {
	readonly number: number;
	readonly timeS: number;
	/** Every fifth is long and carries its figure. */
	readonly long: boolean;
}

/** The graduations of one side of the rule. */
export const graduations = (beatsS: readonly number[], every = 5): Graduation[] =>
	beatsS.map((timeS, index) => ({
		number: index + 1,
		timeS,
		long: (index + 1) % every === 0
	}));

/**
 * What the tie of beats says, in a sentence.
 * @param yoursHz beats per second, 0 for none
 * @param targetHz beats per second, 0 for none
 */
export function tieSentence(yoursHz: number, targetHz: number): string {
	if (yoursHz <= 0 && targetHz <= 0) return 'Neither beats.';
	if (yoursHz <= 0) return 'Yours does not beat; the target does.';
	if (targetHz <= 0) return 'Yours beats; the target does not.';
	const ratio = yoursHz / targetHz;
	if (Math.abs(ratio - 1) < 0.005) return 'The same rate.';
	return ratio < 1 ? 'Your beat is the slower one.' : 'Your beat is the faster one.';
}
