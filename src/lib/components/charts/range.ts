/**
 * The range glyph: tolerance as a brass gate, the 95 % interval as a bar, the value as a mark whose
 * shape says the verdict. Pure geometry.
 */

export type Verdict = 'inside' | 'outside' | 'near' | 'still';

/** Least and greatest; `null` is an open side. */
export type Limits = readonly [least: number | null, greatest: number | null];

export const VERDICT_WORDS: Readonly<Record<Verdict, string>> = {
	inside: 'inside',
	outside: 'outside',
	near: 'too close to say',
	still: 'inside'
};

/**
 * Verdict of an interval against a tolerance: inside when all of it lies within, outside when none of
 * it does, near otherwise. A value alone is an interval of no width. Same unit throughout.
 */
export function verdictOf(
	interval: readonly [number, number],
	tolerance: Limits
): 'inside' | 'outside' | 'near' {
	const [least, greatest] = interval[0] <= interval[1] ? interval : [interval[1], interval[0]];
	const lo = tolerance[0] ?? -Infinity;
	const hi = tolerance[1] ?? Infinity;
	if (least >= lo && greatest <= hi) return 'inside';
	if (greatest < lo || least > hi) return 'outside';
	return 'near';
}

export interface RangeInput {
	readonly value: number | null;
	readonly interval?: readonly [number, number] | null;
	readonly tolerance: Limits;
	readonly domain: readonly [number, number];
	readonly widthPx: number;
}

export interface RangeGeometry {
	readonly gateLeft: number;
	readonly gateWidth: number;
	/** x of the brackets that are drawn; null where the side is open. */
	readonly postLeft: number | null;
	readonly postRight: number | null;
	readonly bar: readonly [number, number] | null;
	readonly mark: number | null;
}

const EDGE_PX = 5;

/** Where the parts of a range glyph stand, in px. What lies beyond the domain stands at its edge. */
export function rangeGeometry(input: RangeInput): RangeGeometry {
	const { value, interval, tolerance, domain, widthPx } = input;
	const span = domain[1] - domain[0] || 1;
	const place = (v: number) => {
		const x = EDGE_PX + ((v - domain[0]) / span) * (widthPx - 2 * EDGE_PX);
		return Math.round(Math.min(widthPx - EDGE_PX, Math.max(EDGE_PX, x)) * 10) / 10;
	};
	const left = place(tolerance[0] ?? domain[0]);
	const right = place(tolerance[1] ?? domain[1]);
	return {
		gateLeft: left,
		gateWidth: Math.max(0, right - left),
		postLeft: tolerance[0] === null ? null : left,
		postRight: tolerance[1] === null ? null : right,
		bar: interval ? [place(interval[0]), place(interval[1])] : null,
		mark: value === null || !Number.isFinite(value) ? null : place(value)
	};
}

export interface Tag {
	readonly text: string;
	/** Middle of the text, px. */
	readonly x: number;
}

/** Width of a figure of the axis text, px: tabular figures of 0.517 em at 15 px. */
const FIGURE_PX = 7.8;
const TAG_GAP_PX = 10;
const textWidth = (text: string) => text.length * FIGURE_PX;

/**
 * Where the figures of the two brackets stand. Too close for two, they are said once beneath the
 * middle of the gate: "± 1.00" when they are opposites, "0.70 to 1.10" otherwise. None leaves the
 * picture.
 */
export function tagPlaces(
	tags: readonly [string, string],
	gate: Pick<RangeGeometry, 'gateLeft' | 'gateWidth'>,
	widthPx: number
): Tag[] {
	const within = (text: string, x: number): Tag => {
		const half = textWidth(text) / 2;
		return { text, x: Math.min(Math.max(half, widthPx - half), Math.max(half, x)) };
	};
	const [least, greatest] = tags;
	const pair = [within(least, gate.gateLeft), within(greatest, gate.gateLeft + gate.gateWidth)];
	const apart = (textWidth(least) + textWidth(greatest)) / 2 + TAG_GAP_PX;
	if (pair[1].x - pair[0].x >= apart) return pair;
	const size = greatest.replace(/^\+/, '');
	const opposites = least === `−${size}` || least === `-${size}`;
	const once = opposites ? `± ${size}` : `${least} to ${greatest}`;
	return [within(once, gate.gateLeft + gate.gateWidth / 2)];
}

/**
 * A domain that shows tolerance, interval and value with room around them, starting at nothing when
 * nothing is one of its ends. Any unit.
 */
export function domainFor(
	tolerance: Limits,
	value: number | null,
	interval?: readonly [number, number] | null
): [number, number] {
	const shown = [tolerance[0], tolerance[1], value, interval?.[0] ?? null, interval?.[1] ?? null];
	const finite = shown.filter((v): v is number => v !== null && Number.isFinite(v));
	if (finite.length === 0) return [0, 1];
	const least = Math.min(...finite);
	const greatest = Math.max(...finite);
	if (tolerance[0] === null && least >= 0) return [0, (greatest || 1) * 1.25];
	const room = (greatest - least || Math.abs(greatest) || 1) * 0.35;
	return [least >= 0 ? Math.max(0, least - room) : least - room, greatest + room];
}
