/**
 * The drawing of a shoreline: the loudness of one coincident partial over time as a coast, with
 * waterlines at true distances from it. Pure geometry; y grows downward as in SVG.
 */

/** Loudness of one partial over time, and the times at which its beats are quietest. */
export interface Shore {
	/** Seconds after the blow, rising. */
	readonly timesS: readonly number[];
	/** Level in dB at those times, any reference. */
	readonly levelDb: readonly number[];
	/** Seconds at which a beat is at its quietest, rising. */
	readonly beatsS?: readonly number[];
}

export type Point = readonly [x: number, y: number];

/** Height of the land in dB, from the base line to the loudest moment. */
export const SHORE_RANGE_DB = 46;

/** Land never sinks quite to the base line: a decayed tone is quiet, not absent. */
const LEAST_HEIGHT = 0.035;
const STEP_PX = 1.5;

export interface CoastOptions {
	readonly widthPx: number;
	readonly heightPx: number;
	/** Length of the time axis in seconds. */
	readonly seconds: number;
	/** Level in dB that reaches the top; by default the shore's own loudest. */
	readonly topDb?: number;
	/** Free space above the loudest moment in px. */
	readonly marginPx?: number;
}

/** Loudest level of the given shores in dB; 0 when none has a finite level. */
export function loudestDb(...shores: readonly Shore[]): number {
	let loudest = -Infinity;
	for (const shore of shores)
		for (const level of shore.levelDb)
			if (Number.isFinite(level) && level > loudest) loudest = level;
	return loudest === -Infinity ? 0 : loudest;
}

/**
 * Level in dB at `timeS` by linear interpolation; the first level before the first time, the last
 * after the last; −Infinity when the shore is empty.
 */
export function levelAt(shore: Shore, timeS: number): number {
	const { timesS, levelDb } = shore;
	const count = Math.min(timesS.length, levelDb.length);
	if (count === 0) return -Infinity;
	if (timeS <= timesS[0]) return levelDb[0];
	if (timeS >= timesS[count - 1]) return levelDb[count - 1];
	let low = 0;
	let high = count - 1;
	while (high - low > 1) {
		const middle = (low + high) >> 1;
		if (timesS[middle] <= timeS) low = middle;
		else high = middle;
	}
	const share = (timeS - timesS[low]) / (timesS[high] - timesS[low]);
	return levelDb[low] + share * (levelDb[high] - levelDb[low]);
}

/** The coast as points from left to right. A shore shorter than the axis ends where it ends. */
export function coastPoints(shore: Shore, options: CoastOptions): Point[] {
	const { widthPx, heightPx, seconds, marginPx = 6 } = options;
	const topDb = options.topDb ?? loudestDb(shore);
	const count = Math.min(shore.timesS.length, shore.levelDb.length);
	if (count === 0) return [];
	const lastS = shore.timesS[count - 1];
	const steps = Math.max(1, Math.round(widthPx / STEP_PX));
	const levels = sampled(shore, steps, seconds);
	const points: Point[] = [];
	for (let step = 0; step <= steps; step++) {
		if ((step / steps) * seconds > lastS + seconds / steps) break;
		const level = levels[step];
		const height = (level - topDb + SHORE_RANGE_DB) / SHORE_RANGE_DB;
		const clamped = Math.min(1, Math.max(LEAST_HEIGHT, Number.isFinite(height) ? height : 0));
		points.push([(step / steps) * widthPx, heightPx - clamped * (heightPx - marginPx)]);
	}
	return points;
}

/**
 * Levels at the steps of the drawing. The bottom of a dip narrower than a step would be missed by
 * reading between samples, so each local minimum is put at the step nearest to it.
 */
function sampled(shore: Shore, steps: number, seconds: number): number[] {
	const levels = Array.from({ length: steps + 1 }, (_, step) =>
		levelAt(shore, (step / steps) * seconds)
	);
	const { timesS, levelDb } = shore;
	for (let index = 1; index < Math.min(timesS.length, levelDb.length) - 1; index++) {
		const level = levelDb[index];
		if (level > levelDb[index - 1] || level >= levelDb[index + 1]) continue;
		const step = Math.round((timesS[index] / seconds) * steps);
		if (step >= 0 && step <= steps) levels[step] = Math.min(levels[step], level);
	}
	return levels;
}

/** Index of the highest point among the first few: the blow, before which there is no water. */
function blowIndex(points: readonly Point[]): number {
	let peak = 0;
	for (let index = 1; index < Math.min(30, points.length); index++)
		if (points[index][1] < points[peak][1]) peak = index;
	return peak;
}

/**
 * The line at `radiusPx` from the coast, on the water's side: the coast thickened by a disc of that
 * radius (mathematical dilation), as waterlines on an old chart, then eased over five neighbours.
 * `fromBlow`: there is no water before the loudest of the first moments.
 */
export function waterline(points: readonly Point[], radiusPx: number, fromBlow = true): Point[] {
	const line: Point[] = [];
	for (let index = fromBlow ? blowIndex(points) : 0; index < points.length; index += 2) {
		const x = points[index][0];
		let highest = Infinity;
		for (const [otherX, otherY] of points) {
			const distance = otherX - x;
			if (Math.abs(distance) > radiusPx) continue;
			const y = otherY - Math.sqrt(radiusPx * radiusPx - distance * distance);
			if (y < highest) highest = y;
		}
		line.push([x, highest]);
	}
	return line.map(([x], index) => {
		let sum = 0;
		let count = 0;
		for (
			let other = Math.max(0, index - 2);
			other <= Math.min(line.length - 1, index + 2);
			other++
		) {
			sum += line[other][1];
			count++;
		}
		return [x, sum / count];
	});
}

/** A number for a path: one decimal, no trailing zeros. */
export const px = (value: number): number => Math.round(value * 10) / 10;

/** SVG path through the points; empty for none. */
export function pathOf(points: readonly Point[]): string {
	return points.map(([x, y], index) => `${index ? 'L' : 'M'}${px(x)} ${px(y)}`).join('');
}

/** SVG path of the land between the coast and the base line at `baseY`. */
export function areaOf(points: readonly Point[], baseY: number): string {
	if (points.length === 0) return '';
	const first = points[0][0];
	const last = points[points.length - 1][0];
	return `${pathOf(points)}L${px(last)} ${px(baseY)}L${px(first)} ${px(baseY)}Z`;
}

/** The point of the coast nearest to `x`; the point (x, 0) when there is no coast. */
export function nearestTo(points: readonly Point[], x: number): Point {
	let nearest: Point | null = null;
	for (const point of points)
		if (nearest === null || Math.abs(point[0] - x) < Math.abs(nearest[0] - x)) nearest = point;
	return nearest ?? [x, 0];
}

/**
 * Where the land is lowest within `reachPx` of `x`: a knot's place at the bottom of its dip. The point
 * (x, 0) when there is no coast.
 */
export function lowestNear(points: readonly Point[], x: number, reachPx = 4): Point {
	let lowest = nearestTo(points, x);
	for (const point of points)
		if (Math.abs(point[0] - x) <= reachPx && point[1] > lowest[1]) lowest = point;
	return [x, lowest[1]];
}

/** Points moved down by `byPx`. */
export const lowered = (points: readonly Point[], byPx: number): Point[] =>
	points.map(([x, y]) => [x, y + byPx]);
