/** The ornament at a page's foot: a shore that comes to rest, beats slowing down to stillness. */
import type { Point } from './shore';

/** Points of the shore for a field of the given size in px. */
export function ebbPoints(widthPx: number, heightPx: number): Point[] {
	const steps = 360;
	const points: Point[] = [];
	let phase = 0;
	for (let step = 0; step <= steps; step++) {
		const u = step / steps;
		const rate = 26 * (1 - u) ** 2;
		phase += ((2 * Math.PI * rate) / steps) * 1.15;
		const depth = 0.86 * (1 - u) ** 0.55;
		const sum = Math.hypot(1 + depth * Math.cos(phase), depth * Math.sin(phase)) / (1 + depth);
		const level = 0.28 + 0.72 * Math.max(0.05, 1 + Math.log10(sum) / 1.1);
		const fall = 0.62 + 0.12 * (1 - u);
		points.push([u * widthPx, heightPx - 14 - (heightPx - 26) * level * fall]);
	}
	return points;
}
