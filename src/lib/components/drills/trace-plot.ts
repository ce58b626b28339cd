import type { RawTrial } from '../../drills/types';

export interface TracePlot {
	/** Step line of where the string was. */
	readonly line: string;
	/** Blows along the foot: x, and whether both strings were struck. */
	readonly blows: readonly { x: number; both: boolean }[];
	readonly bandTop: number;
	readonly bandBottom: number;
	readonly zeroY: number;
	readonly endX: number;
	readonly endY: number;
	/** Horizontal rules with their cents. */
	readonly rules: readonly { y: number; cents: number }[];
	/** Seconds at the end of the axis. */
	readonly seconds: number;
}

export interface PlotSize {
	readonly left: number;
	readonly right: number;
	readonly top: number;
	readonly bottom: number;
}

/** What the string did in a trial, in cents from where it belongs, as a step line over time. */
export function tracePlot(raw: RawTrial, toleranceCents: number, size: PlotSize): TracePlot {
	const values = [raw.startCents, ...raw.trace.map(([, , cents]) => cents)];
	const reach = Math.max(2 * toleranceCents, ...values.map(Math.abs)) * 1.08;
	const endMs = Math.max(1000, raw.committedAtMs);
	const x = (tMs: number) => round(size.left + (tMs / endMs) * (size.right - size.left));
	const y = (cents: number) =>
		round(size.top + ((reach - cents) / (2 * reach)) * (size.bottom - size.top));
	let line = `M${x(0)} ${y(raw.startCents)}`;
	for (const [tMs, kind, cents] of raw.trace) if (kind === 'move') line += `H${x(tMs)}V${y(cents)}`;
	line += `H${x(endMs)}`;
	const blows = raw.trace
		.filter(([, kind]) => kind === 'strike' || kind === 'fixed' || kind === 'moving')
		.map(([tMs, kind]) => ({ x: x(tMs), both: kind === 'strike' }));
	return {
		line,
		blows,
		bandTop: y(toleranceCents),
		bandBottom: y(-toleranceCents),
		zeroY: y(0),
		endX: x(endMs),
		endY: y(raw.committedCents),
		rules: rulesWithin(reach).map((cents) => ({ cents, y: y(cents) })),
		seconds: endMs / 1000
	};
}

/** Four to six round figures on either side of nothing. */
function rulesWithin(reach: number): number[] {
	const step = [1, 2, 5, 10, 20, 50].find((size) => reach / size < 3.5) ?? 50;
	const count = Math.floor(reach / step);
	return Array.from({ length: 2 * count + 1 }, (_, k) => (k - count) * step);
}

function round(px: number): number {
	return Math.round(px * 10) / 10;
}
