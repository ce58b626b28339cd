import { describe, expect, it } from 'vitest';
import { DARK, LIGHT, type ColourName, type Palette } from './palette';

/** Relative luminance, WCAG 2.2 definition. */
function luminance(hex: string): number {
	const channel = (at: number) => {
		const c = parseInt(hex.slice(at, at + 2), 16) / 255;
		return c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4;
	};
	return 0.2126 * channel(1) + 0.7152 * channel(3) + 0.0722 * channel(5);
}
/** Contrast ratio, WCAG 2.2 definition. */
function contrast(a: string, b: string): number {
	const [high, low] = [luminance(a), luminance(b)].sort((x, y) => y - x);
	return (high + 0.05) / (low + 0.05);
}

type Pair = [ColourName, ColourName[]];
/** Text needs 4.5 to 1 (success criterion 1.4.3). */
const TEXT: Pair[] = [
	['ink', ['ground', 'sheet', 'well', 'brass-wash', 'wood']],
	['ink-soft', ['ground', 'sheet', 'well']],
	['brass-ink', ['ground', 'sheet', 'brass-wash']],
	['felt', ['ground', 'sheet']],
	['on-ink', ['ink']]
];
/** Graphics that carry meaning need 3 to 1 (1.4.11). */
const GRAPHICS: Pair[] = [
	['brass', ['ground', 'sheet', 'well', 'brass-wash']],
	['line', ['ground', 'sheet']],
	['land', ['ground']],
	['focus', ['ground', 'sheet']],
	['felt', ['ground', 'sheet', 'brass-wash']]
];

describe.each<[string, Palette]>([
	['light', LIGHT],
	['dark', DARK]
])('contrast, %s', (_name, palette) => {
	const rows = (pairs: Pair[]) =>
		pairs.flatMap(([colour, grounds]) => grounds.map((ground) => [colour, ground] as const));

	it.each(rows(TEXT))('%s as text on %s', (colour, ground) => {
		expect(contrast(palette[colour], palette[ground])).toBeGreaterThanOrEqual(4.5);
	});
	it.each(rows(GRAPHICS))('%s as drawing on %s', (colour, ground) => {
		expect(contrast(palette[colour], palette[ground])).toBeGreaterThanOrEqual(3);
	});
});

it('computes contrast as the standard does', () => {
	expect(contrast('#000000', '#ffffff')).toBeCloseTo(21, 6);
	expect(contrast('#777777', '#ffffff')).toBeCloseTo(4.48, 2);
});
