/**
 * The colours of Ebbtone, each with one job. The theme in tailwind.config.ts and the contrast test
 * read them from here, so what is tested is what is shown.
 */

export type ColourName =
	| 'ground'
	| 'sheet'
	| 'well'
	| 'ink'
	| 'ink-soft'
	| 'land'
	| 'quiet'
	| 'on-ink'
	| 'brass'
	| 'brass-ink'
	| 'brass-wash'
	| 'felt'
	| 'line'
	| 'hair'
	| 'water'
	| 'wool'
	| 'wood'
	| 'focus';

export type Palette = Readonly<Record<ColourName, string>>;

/** Paper and spruce. */
export const LIGHT: Palette = {
	ground: '#f5eddb', // cream paper, the page
	sheet: '#fbf6ea', // a sheet lying on it: panels, fields, drawings
	well: '#ece2cb', // a place pressed into it: pressed, read-only
	ink: '#163a2f', // spruce ink: text, lines, what you did
	'ink-soft': '#47604f', // second voice
	land: '#1f4d3f', // the fill of your shoreline
	quiet: '#1f4d3f', // the same as ornament, large
	'on-ink': '#fbf6ea', // text on ink
	brass: '#a2741a', // graphics: the target, its tolerance, the place where you are
	'brass-ink': '#76530c', // the same, as text
	'brass-wash': '#f0dfb4', // the tolerance band
	felt: '#9c2a1f', // outside tolerance and faults, nothing else
	line: '#868568', // edges of fields, axes
	hair: '#d5c9ab', // rules that carry no meaning
	water: '#5f7f72', // waterlines off a shore, ornament
	wool: '#b9b49a', // mute strip in drawings
	wood: '#dcc9a2', // pin block and bridge in drawings
	focus: '#76530c'
};

/** The same workshop in the evening. */
export const DARK: Palette = {
	ground: '#14201b',
	sheet: '#1b2a24',
	well: '#0e1814',
	ink: '#f0e7d2',
	'ink-soft': '#b3bda9',
	land: '#bccab3',
	quiet: '#263d33',
	'on-ink': '#14201b',
	brass: '#bf913f',
	'brass-ink': '#e0b25e',
	'brass-wash': '#3d3420',
	felt: '#f2978a',
	line: '#7d8b7a',
	hair: '#33443b',
	water: '#6f9384',
	wool: '#69746a',
	wood: '#3a3a2a',
	focus: '#e0b25e'
};

export const SHADOWS = {
	light: {
		1: '0 1px 0 rgb(71 52 15 / 0.18)',
		2: '0 1px 1px rgb(71 52 15 / 0.16), 0 10px 24px -14px rgb(71 52 15 / 0.38)'
	},
	dark: {
		1: '0 1px 0 rgb(0 0 0 / 0.5)',
		2: '0 1px 1px rgb(0 0 0 / 0.5), 0 12px 28px -14px rgb(0 0 0 / 0.8)'
	}
} as const;
