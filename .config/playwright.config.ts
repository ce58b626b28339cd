import { defineConfig, type PlaywrightTestProject } from '@playwright/test';
import { fileURLToPath } from 'node:url';

const here = (path: string) => fileURLToPath(new URL(path, import.meta.url));

/** Chromium's own errands would be refused by a closed network at every start. */
export const CHROMIUM_ARGS = [
	'--no-sandbox',
	'--disable-dev-shm-usage',
	'--disable-gpu',
	'--disable-quic',
	'--no-first-run',
	'--disable-background-networking',
	'--disable-component-update',
	'--disable-sync',
	'--autoplay-policy=no-user-gesture-required'
];

const executablePath = process.env.CHROMIUM_PATH ?? '/usr/bin/chromium';

/** A browser whose microphone hears a real recording, prepared when the application is served. */
function microphone(name: string, recording: string): PlaywrightTestProject {
	return {
		name: `microphone-${name}`,
		testMatch: new RegExp(`/${name}\\.microphone\\.spec\\.ts$`),
		use: {
			permissions: ['microphone'],
			launchOptions: {
				executablePath,
				args: [
					...CHROMIUM_ARGS,
					'--use-fake-ui-for-media-stream',
					'--use-fake-device-for-media-stream',
					`--use-file-for-fake-audio-capture=${here(`../.ebbtone/e2e/${recording}.wav`)}`
				]
			}
		}
	};
}

export default defineConfig({
	testDir: here('../tests/e2e'),
	outputDir: here('../test-results'),
	globalSetup: here('../tests/support/application.ts'),
	timeout: 240_000,
	expect: { timeout: 30_000 },
	fullyParallel: false,
	workers: 1,
	retries: 0,
	reporter: [['list']],
	use: {
		baseURL: process.env.EBBTONE_E2E_ORIGIN,
		screenshot: 'only-on-failure',
		viewport: { width: 1280, height: 800 },
		launchOptions: { executablePath, args: CHROMIUM_ARGS }
	},
	projects: [
		{ name: 'desk', testIgnore: /\.(microphone|phone)\.spec\.ts$/ },
		{
			name: 'phone',
			testMatch: /\.phone\.spec\.ts$/,
			use: { viewport: { width: 390, height: 844 }, hasTouch: true, isMobile: true }
		},
		microphone('note', 'grand-one-a3-v10-l'),
		microphone('interval', 'grand-one-a3c4-m3-v10-l')
	]
});
