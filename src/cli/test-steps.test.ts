import { describe, expect, it } from 'vitest';
import { countPlaywright, countVitest } from './test-steps';

const file = (status: string, tests: [string, string][]) => ({
	name: 'a.test.ts',
	status,
	message: '',
	assertionResults: tests.map(([fullName, state]) => ({ fullName, status: state }))
});
const vitestReport = (passed: number, files: ReturnType<typeof file>[]) => ({
	numPassedTests: passed,
	numFailedTests: 0,
	numPendingTests: 1,
	numTodoTests: 0,
	success: true,
	testResults: files
});

describe('counting a Vitest report', () => {
	it('counts passed, failed and skipped tests and names the failed ones', () => {
		const report = vitestReport(2, [
			file('failed', [
				['adds', 'passed'],
				['divides', 'failed']
			])
		]);
		expect(countVitest(report, 1)).toEqual({
			passed: 2,
			failed: 1,
			skipped: 1,
			failures: ['a.test.ts: divides']
		});
	});

	it('counts a file that could not be run', () => {
		expect(countVitest(vitestReport(3, [file('failed', [])]), 1).failed).toBe(1);
	});

	it('fails when the runner failed although every test passed, and when there was no test', () => {
		expect(countVitest(vitestReport(3, [file('passed', [['adds', 'passed']])]), 1).failed).toBe(1);
		expect(countVitest(vitestReport(0, []), 0).failed).toBe(1);
	});
});

describe('counting a Playwright report', () => {
	const report = (expected: number, unexpected: number, flaky = 0, errors = 0) => ({
		stats: { expected, unexpected, flaky, skipped: 0 },
		errors: Array.from({ length: errors }, () => ({ message: 'no browser' })),
		suites: [
			{
				title: 'lesson.spec.ts',
				file: 'lesson.spec.ts',
				specs: [{ title: 'whole lesson', ok: unexpected === 0 }]
			}
		]
	});

	it('counts and names failed tests', () => {
		const tally = countPlaywright(report(4, 1), 1);
		expect(tally).toMatchObject({ passed: 4, failed: 1 });
		expect(tally.failures).toEqual(['lesson.spec.ts: whole lesson']);
	});

	it('takes a pass at the second try for a failure', () => {
		expect(countPlaywright(report(4, 0, 1), 0).failed).toBe(1);
	});

	it('fails when the runner failed, and when there was no test', () => {
		expect(countPlaywright(report(4, 0, 0, 1), 1).failed).toBe(1);
		expect(countPlaywright(report(4, 0), 1).failed).toBe(1);
		expect(countPlaywright(report(0, 0), 0).failed).toBe(1);
	});
});
