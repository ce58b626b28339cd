/** How many attempts are stored per second and how long the progress page takes, over HTTP. */
import { randomUUID } from 'node:crypto';
import { createRandom } from '../../lib/acoustics/random';
import { generateBlock, scoreBlock, type AttemptSubmission } from '../../lib/drills';
import { PERFECT_PERSON, tune } from '../../lib/drills/simulation/controller';
import { DEMO_SIGN_INS } from '../../lib/server/database/seeders';
import { startApplication } from '../application';
import { postgresPrograms } from '../setup/debian';
import { runQuietly } from '../setup/run';
import { Visitor } from './browser';
import { benchLine, quantile, type BenchLine } from './line';

const AT_ONCE = 8;

function attempt(seed: number, finishedAt: Date): AttemptSubmission {
	const stimulus = generateBlock(seed % 2 === 0 ? 'unison' : 'interval', seed);
	const random = createRandom(seed);
	const trials = stimulus.trials.map((spec) => tune(spec, PERFECT_PERSON, random));
	const lastedMs = trials.reduce((sum, trial) => sum + trial.committedAtMs, 60_000);
	return {
		id: randomUUID(),
		drill: stimulus.drill as AttemptSubmission['drill'],
		engineVersion: stimulus.engineVersion,
		seed,
		stimulus,
		trials,
		device: {
			sampleRateHz: 48_000,
			outputLatencySeconds: 0.02,
			userAgentClass: 'desktop-chromium'
		},
		clientScore: scoreBlock(stimulus, trials).score,
		startedAt: new Date(finishedAt.getTime() - lastedMs).toISOString(),
		finishedAt: finishedAt.toISOString()
	};
}

/** Attempts per second with eight senders at once. */
async function storing(visitors: Visitor[], count: number): Promise<number> {
	const now = Date.now();
	const waiting = Array.from({ length: count }, (_, i) =>
		attempt(1000 + i, new Date(now - i * 60_000))
	);
	const start = performance.now();
	await Promise.all(
		Array.from({ length: AT_ONCE }, async (_, sender) => {
			for (let next = waiting.pop(); next; next = waiting.pop()) {
				await visitors[sender % visitors.length].send(next);
			}
		})
	);
	return count / ((performance.now() - start) / 1000);
}

/** Milliseconds of the slowest twentieth of requests, one after another. */
async function p95Ms(visitor: Visitor, path: string, count: number): Promise<number> {
	const times: number[] = [];
	for (let i = 0; i < count; i++) {
		const start = performance.now();
		const answer = await visitor.ask(path);
		await answer.text();
		if (answer.status !== 200) throw new Error(`${path} answered ${answer.status}.`);
		times.push(performance.now() - start);
	}
	return quantile(times, 0.95);
}

/** Transactions per second of PostgreSQL's own benchmark on the same cluster; null without it. */
function pgbench(databaseUrl: string, seconds: number): number | null {
	const program = `${postgresPrograms()}/pgbench`;
	if (runQuietly(program, ['-i', '-q', '-s', '2', databaseUrl]).code !== 0) return null;
	const run = runQuietly(program, ['-c', String(AT_ONCE), '-T', String(seconds), databaseUrl]);
	const tps = /tps = ([\d.]+)/.exec(run.stdout);
	return tps ? Number(tps[1]) : null;
}

export async function lines(quick: boolean): Promise<BenchLine[]> {
	const application = await startApplication({
		scratch: true,
		demo: true,
		say: (line) => process.stderr.write(`${line}\n`),
		env: { LOG_LEVEL: 'error' }
	});
	try {
		const students = DEMO_SIGN_INS.filter(({ role }) => role === 'student');
		const visitors: Visitor[] = [];
		for (const { email, password } of students.slice(0, 4)) {
			const visitor = new Visitor(application.origin);
			await visitor.signIn(email, password);
			visitors.push(visitor);
		}
		const perSecond = await storing(visitors, quick ? 80 : 400);
		const tps = pgbench(application.databaseUrl, quick ? 2 : 8);
		const pages = quick ? 40 : 200;
		const health = await p95Ms(visitors[0], '/api/health', pages);
		const progress = await p95Ms(visitors[0], '/progress', pages);
		return [
			benchLine('attempts stored over HTTP, eight senders', perSecond, 'per second', {
				reference: tps === null ? null : { name: 'pgbench transactions per second', value: tps }
			}),
			benchLine('progress page, p95', progress, 'ms', {
				bar: 50,
				reference: { name: 'health answer of the same server, p95', value: health }
			})
		];
	} finally {
		await application.stop();
	}
}
