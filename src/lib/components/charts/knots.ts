/**
 * The knots of a shore: where each beat is tied, and where its number stands so that it can be read.
 * Pure geometry; y grows downward as in SVG.
 */
import { lowestNear, type Point } from './shore';

export interface Knot {
	/** The beat's number, from 1. */
	readonly number: number;
	readonly x: number;
	/** The bottom of the dip. */
	readonly y: number;
	/** Middle of the number; null where the numbers are thinned out. */
	readonly textX: number | null;
	/** Base line of the number. */
	readonly textY: number;
}

export interface KnotOptions {
	readonly coast: readonly Point[];
	readonly widthPx: number;
	/** y of the base line of the land. */
	readonly baseY: number;
	/** Only each so many beats carry their number. */
	readonly every: number;
	/** Base line of numbers that stand at the land's foot; without it they stand in the water. */
	readonly footY?: number;
}

/** Numbers nearer than this run into each other. */
const NUMBER_PX = 24;
/** Half the width of a number with its halo, and what keeps it off the coast. */
const HALF_PX = 8;
const CLEAR_PX = 5;
/** A knot's own height over the dip, under its number. */
const ABOVE_KNOT_PX = 12;
/** Room that a number at the foot and a knot above it need. */
const FOOT_ROOM_PX = 30;
/** Land this low is the floor of the drawing: nothing is seen to beat there. */
const FLOOR_PX = 7;

/** Each how many beats carry a number, so that numbers `spacingPx` apart stay readable. */
export function numberEvery(spacingPx: number): number {
	if (!(spacingPx > 0)) return 1;
	return [1, 2, 5, 10].find((every) => every * spacingPx >= NUMBER_PX) ?? 20;
}

/** Least distance of neighbours in px; Infinity for fewer than two. */
export function leastSpacing(xs: readonly number[]): number {
	let least = Infinity;
	for (let index = 1; index < xs.length; index++)
		least = Math.min(least, xs[index] - xs[index - 1]);
	return least;
}

/** How many of the beats at `xs` (px, rising) have land that stands above the floor around them. */
export function beatsAbove(coast: readonly Point[], xs: readonly number[], baseY: number): number {
	const reach = Math.min(60, leastSpacing(xs));
	let seen = xs.length;
	while (seen > 0 && baseY - highestNear(coast, xs[seen - 1], reach) <= FLOOR_PX) seen--;
	return seen;
}

/** The knots of the beats at `xs` (px, rising). */
export function knotsOf(xs: readonly number[], options: KnotOptions): Knot[] {
	const { coast, widthPx, every, footY } = options;
	return xs.map((x, index) => {
		const number = index + 1;
		const y = lowestNear(coast, x)[1];
		// In the dip where it is wide enough, else over the shoulders of the land.
		const over = Math.min(y - ABOVE_KNOT_PX, highestNear(coast, x, HALF_PX) - CLEAR_PX);
		const atFoot = footY !== undefined && footY - y >= FOOT_ROOM_PX;
		return {
			number,
			x,
			y,
			textX: number % every === 0 ? Math.min(widthPx - HALF_PX, Math.max(HALF_PX, x)) : null,
			textY: atFoot ? footY : over
		};
	});
}

/** The least y, that is the top of the land, within `reachPx` of `x`; Infinity without a coast. */
function highestNear(coast: readonly Point[], x: number, reachPx: number): number {
	let top = Infinity;
	for (const [pointX, y] of coast) if (Math.abs(pointX - x) <= reachPx && y < top) top = y;
	return top;
}
