import { spawn, type ChildProcess } from 'node:child_process';
import { rmSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { migrate } from '../lib/server/database/migrate';
import { resetEnv } from '../lib/server/env';
import { startCluster, startScratchCluster } from './cluster';
import { startMailSink } from './mail-sink';
import { requireBuild } from './setup/build';
import { ROOT, stateFolder } from './setup/places';
import { freePort, isFree } from './setup/ports';
import { SetUpError } from './setup/run';
import { keptSecret } from './setup/secrets';
import { copyForServing } from './setup/serving';

export interface ApplicationOptions {
	/** A database and mail of its own, thrown away at the end; for tests and benchmarks. */
	scratch?: boolean;
	/** Demo people and their history. */
	demo: boolean;
	/** Tells the person at the terminal what is going on. */
	say: (line: string) => void;
	/** False when the caller has built the application itself. */
	build?: boolean;
	/** Gives up starting, and stops what had been started. */
	signal?: AbortSignal;
	/** Settings for the server over and above its own, such as LOG_LEVEL. */
	env?: Record<string, string>;
}

export interface RunningApplication {
	/** The address people open. */
	origin: string;
	databaseUrl: string;
	/** Folder of the mails that the local sink received; null where mail goes to a real server. */
	mailFolder: string | null;
	/** Resolves when the server ends by itself, with its exit code. */
	ended: Promise<number>;
	/** Stops everything that was started. Safe to call twice. */
	stop(): Promise<void>;
}

type Closer = () => Promise<void>;

/** The port and the one address, from the environment or free. */
async function address(scratch: boolean): Promise<{ host: string; port: number; origin: string }> {
	const host = process.env.HOST ?? '127.0.0.1';
	const wanted = scratch ? undefined : process.env.PORT;
	if (wanted !== undefined && !(await isFree(Number(wanted), host))) {
		throw new SetUpError(`Port ${wanted} is taken. Choose another with PORT, or none.`);
	}
	const port = wanted ? Number(wanted) : await freePort(scratch ? 0 : 3000, host);
	const given = scratch ? undefined : process.env.ORIGIN || undefined;
	return { host, port, origin: (given ?? `http://localhost:${port}`).replace(/\/+$/, '') };
}

async function openDatabase(options: ApplicationOptions, closers: Closer[]): Promise<string> {
	if (!options.scratch && process.env.DATABASE_URL) return process.env.DATABASE_URL;
	options.say('Starting the database …');
	const cluster = options.scratch
		? await startScratchCluster(options.say)
		: await startCluster({ name: 'main', say: options.say });
	closers.push(() => cluster.stop({ remove: options.scratch }));
	return cluster.url;
}

async function openMail(options: ApplicationOptions, closers: Closer[]) {
	if (!options.scratch && process.env.SMTP_URL) return { url: process.env.SMTP_URL, folder: null };
	const folder = stateFolder(options.scratch ? `mail-${process.pid}` : 'mail');
	const sink = await startMailSink(folder);
	closers.push(async () => {
		await sink.stop();
		if (options.scratch) rmSync(folder, { recursive: true, force: true });
	});
	return { url: sink.url, folder };
}

/** Answers when the server does; fails when it ends first. */
async function untilHealthy(
	server: ChildProcess,
	{ host, port }: { host: string; port: number },
	signal?: AbortSignal
): Promise<void> {
	const reachable = host === '0.0.0.0' || host === '::' ? '127.0.0.1' : host;
	for (let i = 0; i < 300; i++) {
		signal?.throwIfAborted();
		if (server.exitCode !== null || server.signalCode !== null) break;
		const answer = await fetch(`http://${reachable}:${port}/api/health`).catch(() => null);
		if (answer?.ok) return;
		await pause(100);
	}
	throw new SetUpError('The server did not start; see above.');
}

function serve(settings: Record<string, string>, closers: Closer[]) {
	const folder = copyForServing(join(ROOT, 'build'), stateFolder());
	const server = spawn(process.execPath, [join(folder, 'index.js')], {
		cwd: ROOT,
		// Its log goes to stderr: stdout carries the address and the demo sign-ins only.
		stdio: ['ignore', 2, 2],
		env: { ...process.env, ...settings, STARTED_BY: String(process.pid) },
		// Ctrl-C in a terminal goes to us; we stop the server before the database.
		detached: true
	});
	const ended = new Promise<number>((resolve) => {
		server.on('exit', (code) => resolve(code ?? 1));
		server.on('error', () => resolve(127));
	});
	closers.push(async () => {
		if (server.exitCode === null && server.signalCode === null) {
			server.kill('SIGTERM');
			const late = pause(8000).then(() => server.kill('SIGKILL'));
			await Promise.race([ended, late]);
			await ended;
		}
		rmSync(folder, { recursive: true, force: true });
	});
	return { server, ended };
}

/**
 * Starts everything the application consists of: database, schema, demo, mail sink, build, server.
 * @throws SetUpError with a sentence for the person; whatever had been started is stopped.
 */
export async function startApplication(options: ApplicationOptions): Promise<RunningApplication> {
	const closers: Closer[] = [];
	let stopping: Promise<void> | undefined;
	const stop = () =>
		(stopping ??= (async () => {
			for (const close of closers.reverse()) await close().catch(() => {});
		})());
	try {
		const { host, port, origin } = await address(options.scratch ?? false);
		const databaseUrl = await openDatabase(options, closers);
		const mail = await openMail(options, closers);
		const settings: Record<string, string> = {
			DATABASE_URL: databaseUrl,
			AUTH_SECRET: process.env.AUTH_SECRET ?? keptSecret('auth'),
			AUTH_URL: origin,
			ORIGIN: origin,
			HOST: host,
			PORT: String(port),
			SMTP_URL: mail.url,
			BODY_SIZE_LIMIT: process.env.BODY_SIZE_LIMIT ?? '1500K',
			SHUTDOWN_TIMEOUT: '5',
			NODE_ENV: 'production',
			LOG_LEVEL: process.env.LOG_LEVEL ?? 'warn',
			...(mail.folder && options.demo ? { MAIL_SINK_DIR: mail.folder } : {}),
			...options.env
		};
		// The services read their settings from the environment of this process.
		Object.assign(process.env, settings);
		resetEnv();
		options.signal?.throwIfAborted();
		await migrate(databaseUrl, 'up');
		if (options.demo) await putDemo(options.say);
		options.signal?.throwIfAborted();
		if (options.build !== false) await requireBuild(options.say, options.signal);
		options.signal?.throwIfAborted();
		const { server, ended } = serve(settings, closers);
		await untilHealthy(server, { host, port }, options.signal);
		return { origin, databaseUrl, mailFolder: mail.folder, ended, stop };
	} catch (problem) {
		await stop();
		throw problem;
	}
}

async function putDemo(say: (line: string) => void): Promise<void> {
	say('Preparing the demonstration …');
	const { closeDatabase } = await import('../lib/server/database');
	const { seedDemo } = await import('../lib/server/database/seeders');
	const { measuredChecks } = await import('./demo/string-checks');
	try {
		await seedDemo({ today: new Date(), measure: measuredChecks });
	} finally {
		await closeDatabase();
	}
}
