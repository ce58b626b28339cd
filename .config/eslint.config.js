import js from '@eslint/js';
import prettier from 'eslint-config-prettier';
import svelte from 'eslint-plugin-svelte';
import globals from 'globals';
import { defineConfig, globalIgnores } from 'eslint/config';
import ts from 'typescript-eslint';
import svelteConfig from '../svelte.config.js';

const PURE = ['acoustics', 'mechanics', 'drills', 'course', 'synthesis/dsp', 'measurement/dsp'];
const pureFiles = PURE.map((room) => `**/src/lib/${room}/**/*.ts`);

export default defineConfig(
	globalIgnores([
		'**/build/',
		'**/.svelte-kit/',
		'**/.ebbtone/',
		'**/node_modules/',
		'**/fixtures/',
		'**/static/'
	]),
	js.configs.recommended,
	...ts.configs.recommended,
	...svelte.configs.recommended,
	prettier,
	...svelte.configs.prettier,
	{
		languageOptions: { globals: { ...globals.browser, ...globals.node } },
		rules: {
			'no-undef': 'off',
			'@typescript-eslint/no-unused-vars': [
				'error',
				{ argsIgnorePattern: '^_', varsIgnorePattern: '^_' }
			],
			// Paths are plain strings here: the application is served from the root.
			'svelte/no-navigation-without-resolve': 'off'
		}
	},
	{
		files: ['**/*.svelte', '**/*.svelte.ts', '**/*.svelte.js'],
		languageOptions: {
			parserOptions: {
				projectService: false,
				extraFileExtensions: ['.svelte'],
				parser: ts.parser,
				svelteConfig
			}
		}
	},
	{
		// Pure rooms know no clock, no global randomness, no DOM.
		files: pureFiles,
		ignores: ['**/*.test.ts'],
		rules: {
			'no-restricted-properties': [
				'error',
				{ object: 'Math', property: 'random', message: 'Pass a seeded generator in.' },
				{ object: 'Date', property: 'now', message: 'Pass the time in.' },
				{ object: 'performance', property: 'now', message: 'Pass the time in.' }
			],
			'no-restricted-globals': ['error', 'window', 'document', 'navigator', 'localStorage', 'fetch']
		}
	},
	{
		// SvelteKit's own guard is off under the test runner, so the border is linted too.
		files: ['**/src/lib/components/**', '**/src/lib/offline/**', '**/src/routes/**/+page.svelte'],
		rules: {
			'no-restricted-imports': ['error', { patterns: ['$lib/server', '$lib/server/*'] }]
		}
	}
);
