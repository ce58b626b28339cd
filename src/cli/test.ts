/**
 * `npm test`: sets up what the tests need, runs every step even when one fails, and ends with the
 * line `N passed, N failed`. `npm test -- unit rooms` runs the steps whose names begin so.
 */
import { requireChromium, requirePostgres } from './setup/debian';
import { SetUpError } from './setup/run';
import { steps, type Tally } from './test-steps';

const asked = new AbortController();
for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) {
	process.on(signal, () => asked.abort());
}
const parent = process.ppid;
setInterval(() => {
	if (process.ppid !== parent) asked.abort();
}, 1000).unref();

const say = (line: string) => console.error(line);
const chosen = process.argv.slice(2);

async function setUp(): Promise<string> {
	await requirePostgres(say);
	return requireChromium(say);
}

async function runAll(chromium: string): Promise<[string, Tally][]> {
	const found: [string, Tally][] = [];
	for (const step of steps(chromium)) {
		if (chosen.length > 0 && !chosen.some((name) => step.name.startsWith(name))) continue;
		if (asked.signal.aborted) break;
		console.log(`\n── ${step.name} ──`);
		try {
			found.push([step.name, await step.run(asked.signal)]);
		} catch (problem) {
			const reason = problem instanceof Error ? problem.message : 'failed';
			found.push([step.name, { passed: 0, failed: 1, skipped: 0, failures: [reason] }]);
		}
	}
	return found;
}

function summary(found: [string, Tally][]): { passed: number; failed: number } {
	console.log('\n── summary ──');
	let passed = 0;
	let failed = 0;
	for (const [name, tally] of found) {
		passed += tally.passed;
		failed += tally.failed;
		const skipped = tally.skipped > 0 ? `, ${tally.skipped} skipped` : '';
		console.log(`${name.padEnd(18)} ${tally.passed} passed, ${tally.failed} failed${skipped}`);
		for (const failure of tally.failures) console.log(`    failed: ${failure}`);
	}
	return { passed, failed };
}

let counts = { passed: 0, failed: 1 };
try {
	counts = summary(await runAll(await setUp()));
	if (asked.signal.aborted || counts.passed + counts.failed === 0) {
		console.log(asked.signal.aborted ? 'Stopped before the end.' : 'No step has such a name.');
		counts.failed += 1;
	}
} catch (problem) {
	say(problem instanceof SetUpError ? problem.message : String((problem as Error).message));
}
console.log(`${counts.passed} passed, ${counts.failed} failed`);
process.exit(counts.failed > 0 ? 1 : 0);
