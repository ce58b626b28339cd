import { spawn } from 'node:child_process';
import { readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { build } from './setup/build';
import { ROOT, stateFolder } from './setup/places';

/** What a step found: checks passed and failed, and the names of the failed ones. */
export interface Tally {
	passed: number;
	failed: number;
	/** Left out on purpose, with a reason in the test itself. */
	skipped: number;
	failures: string[];
}

export interface Step {
	name: string;
	run(signal: AbortSignal): Promise<Tally>;
}

const bin = (path: string) => join(ROOT, 'node_modules', path);

/** Runs one of the tools in this clone, its output on the terminal. @returns the exit code. */
function tool(path: string, args: string[], signal: AbortSignal, env = {}): Promise<number> {
	return new Promise((resolve) => {
		const child = spawn(process.execPath, [bin(path), ...args], {
			cwd: ROOT,
			stdio: ['ignore', 'inherit', 'inherit'],
			env: { ...process.env, ...env }
		});
		const stop = () => child.kill('SIGTERM');
		signal.addEventListener('abort', stop, { once: true });
		child.on('error', () => resolve(127));
		child.on('exit', (code) => {
			signal.removeEventListener('abort', stop);
			resolve(code ?? 1);
		});
	});
}

/** A check that either holds or does not: it counts as one. */
const one = (name: string, holds: boolean): Tally => ({
	passed: holds ? 1 : 0,
	failed: holds ? 0 : 1,
	skipped: 0,
	failures: holds ? [] : [name]
});

function check(name: string, path: string, args: string[]): Step {
	return { name, run: async (signal) => one(name, (await tool(path, args, signal)) === 0) };
}

/** The part of Vitest's JSON report (the shape is Jest's) that is counted. */
interface VitestReport {
	numPassedTests: number;
	numFailedTests: number;
	numPendingTests: number;
	numTodoTests: number;
	success: boolean;
	testResults: {
		name: string;
		status: string;
		message: string;
		assertionResults: { fullName: string; status: string }[];
	}[];
}

/** Counts a Vitest report; a file that could not be run at all counts as one failure. */
export function countVitest(report: VitestReport, exitCode: number): Tally {
	const failures = report.testResults.flatMap((file) => {
		const failed = file.assertionResults.filter((test) => test.status === 'failed');
		const broken = file.status === 'failed' && failed.length === 0;
		return broken
			? [`${file.name}: the file could not be run`]
			: failed.map((test) => `${file.name}: ${test.fullName}`);
	});
	// An error outside of every test, or no test at all, must not pass.
	if (failures.length === 0 && (exitCode !== 0 || report.numPassedTests === 0)) {
		failures.push('the runner failed outside of the tests');
	}
	return {
		passed: report.numPassedTests,
		failed: failures.length,
		skipped: report.numPendingTests + report.numTodoTests,
		failures
	};
}

/** The part of Playwright's JSON report that is counted. */
interface PlaywrightReport {
	stats: { expected: number; unexpected: number; flaky: number; skipped: number };
	errors: { message?: string }[];
	suites?: PlaywrightSuite[];
}
interface PlaywrightSuite {
	title: string;
	file?: string;
	specs?: { title: string; ok: boolean }[];
	suites?: PlaywrightSuite[];
}

function failedSpecs(suite: PlaywrightSuite): string[] {
	const own = (suite.specs ?? []).filter((spec) => !spec.ok);
	return [
		...own.map((spec) => `${suite.file ?? suite.title}: ${spec.title}`),
		...(suite.suites ?? []).flatMap(failedSpecs)
	];
}

/** Counts a Playwright report; a test that passed only at a second try counts as failed. */
export function countPlaywright(report: PlaywrightReport, exitCode: number): Tally {
	const { expected, unexpected, flaky, skipped } = report.stats;
	const failures = (report.suites ?? []).flatMap(failedSpecs);
	let failed = unexpected + flaky + report.errors.length;
	if (failed === 0 && (exitCode !== 0 || expected === 0)) failed = 1;
	while (failures.length < failed) failures.push('the runner failed outside of the tests');
	return { passed: expected, failed, skipped, failures };
}

function readReport<Report>(file: string): Report | null {
	try {
		return JSON.parse(readFileSync(file, 'utf8')) as Report;
	} catch {
		return null;
	}
}

/** Runs a test runner that writes a JSON report, and counts it. */
function counted<Report>(
	name: string,
	run: (report: string, signal: AbortSignal) => Promise<number>,
	count: (report: Report, exitCode: number) => Tally
): Step {
	return {
		name,
		run: async (signal) => {
			const file = join(stateFolder('reports'), `${name.replace(/\W+/g, '-')}.json`);
			rmSync(file, { force: true });
			const exitCode = await run(file, signal);
			const report = readReport<Report>(file);
			return report ? count(report, exitCode) : one(`${name}: no report was written`, false);
		}
	};
}

const vitest = (project: string) =>
	counted<VitestReport>(
		`${project} tests`,
		(file, signal) =>
			tool(
				'vitest/vitest.mjs',
				[
					'run',
					'--project',
					project,
					'--reporter=default',
					'--reporter=json',
					`--outputFile.json=${file}`
				],
				signal
			),
		countVitest
	);

/** Everything that `npm test` asserts, in order. */
export function steps(chromium: string): Step[] {
	return [
		check('format', 'prettier/bin/prettier.cjs', ['--check', '--log-level=warn', '.']),
		check('lint', 'eslint/bin/eslint.js', ['-c', '.config/eslint.config.js', '.']),
		{
			name: 'types',
			run: async (signal) => {
				const synced = await tool('@sveltejs/kit/svelte-kit.js', ['sync'], signal);
				const args = ['--tsconfig', './tsconfig.json', '--threshold', 'warning'];
				const checked = await tool('svelte-check/bin/svelte-check', args, signal);
				return one('types', synced === 0 && checked === 0);
			}
		},
		check('rooms', 'dependency-cruiser/bin/dependency-cruise.mjs', [
			...['-c', '.config/dependency-cruiser.cjs', '--output-type', 'err', 'src']
		]),
		vitest('unit'),
		vitest('component'),
		vitest('integration'),
		{ name: 'build', run: async (signal) => one('build', await build(signal)) },
		counted<PlaywrightReport>(
			'browser tests',
			(file, signal) =>
				tool(
					'@playwright/test/cli.js',
					['test', '-c', '.config/playwright.config.ts', '--reporter=list,json'],
					signal,
					{ PLAYWRIGHT_JSON_OUTPUT_FILE: file, CHROMIUM_PATH: chromium }
				),
			countPlaywright
		)
	];
}
