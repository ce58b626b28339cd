import type { Config } from 'tailwindcss';
import plugin from 'tailwindcss/plugin';
import { DARK, LIGHT, SHADOWS, type Palette } from './src/lib/assets/palette';

/** Colours and shadows as custom properties, so that light and dark are one set of classes. */
function asProperties(palette: Palette, shadows: Record<1 | 2, string>): Record<string, string> {
	const colours = Object.entries(palette).map(([name, value]) => [`--${name}`, value]);
	return {
		...Object.fromEntries(colours),
		'--shadow-1': shadows[1],
		'--shadow-2': shadows[2]
	};
}

const colourNames = Object.keys(LIGHT);

export default {
	content: ['./src/**/*.{html,js,svelte,ts}'],
	darkMode: [
		'variant',
		[
			'@media (prefers-color-scheme: dark) { &:not([data-theme="light"] *) }',
			'&:is([data-theme="dark"] *)'
		]
	],
	theme: {
		colors: {
			transparent: 'transparent',
			current: 'currentColor',
			...Object.fromEntries(colourNames.map((name) => [name, `var(--${name})`]))
		},
		fontFamily: {
			heading: [
				'"Petrona Variable"',
				'"Iowan Old Style"',
				'"Palatino Linotype"',
				'Palatino',
				'Georgia',
				'serif'
			],
			text: ['"Ysabeau Office Variable"', '"Gill Sans"', 'Optima', 'Candara', 'sans-serif'],
			// Figures of the text face are tabular; nothing here needs a third family.
			mono: ['ui-monospace', 'monospace']
		},
		fontSize: {
			xs: ['0.9375rem', '1.3'], // 15 px: axes, key caps, captions; the floor
			s: ['1.0625rem', '1.3'], // 17: tables, second voice
			m: ['1.1875rem', '1.5'], // 19: reading
			l: ['1.4375rem', '1.42'], // 23: leads, h3
			xl: ['1.8125rem', '1.12'], // 29: h2, figures
			'2xl': ['2.3125rem', '1.12'], // 37: h1 on a phone
			'3xl': ['3.0625rem', '1.12'] // 49: h1 on a desk
		},
		fontWeight: { text: '500', heading: '560', press: '650', strong: '700' },
		borderRadius: { none: '0', s: '2px', m: '4px', l: '6px', full: '9999px' },
		boxShadow: { none: 'none', 1: 'var(--shadow-1)', 2: 'var(--shadow-2)' },
		screens: { desk: '900px' },
		extend: {
			spacing: { gutter: 'var(--gutter)', target: '48px' },
			maxWidth: { measure: '60ch', page: 'calc(var(--page) + 2 * var(--gutter))' },
			minHeight: { target: '48px' }
		}
	},
	plugins: [
		plugin(({ addBase }) => {
			const dark = asProperties(DARK, SHADOWS.dark);
			addBase({
				':root': asProperties(LIGHT, SHADOWS.light),
				'@media (prefers-color-scheme: dark)': { ':root:not([data-theme="light"])': dark },
				':root[data-theme="dark"]': dark
			});
		})
	]
} satisfies Config;
