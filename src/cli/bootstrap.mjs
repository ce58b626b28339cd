// The first step of `npm start` and `npm test`: plain Node.js without dependencies, because a bare
// clone has none. Installs them when they are missing or older than the lockfile, then hands over.
import { spawn, spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';

const ROOT = join(dirname(fileURLToPath(import.meta.url)), '..', '..');
const OLDEST_NODE = [20, 19];
const COMMANDS = { start: 'src/cli/start.ts', test: 'src/cli/test.ts' };

const [command, ...rest] = process.argv.slice(2);
if (!(command in COMMANDS)) {
	console.error(`Usage: node src/cli/bootstrap.mjs ${Object.keys(COMMANDS).join('|')}`);
	process.exit(2);
}

const [major, minor] = process.versions.node.split('.').map(Number);
if (major < OLDEST_NODE[0] || (major === OLDEST_NODE[0] && minor < OLDEST_NODE[1])) {
	console.error(
		`Node.js ${OLDEST_NODE.join('.')} or newer is needed; this is ${process.versions.node}.`
	);
	process.exit(1);
}

const lockfile = join(ROOT, 'package-lock.json');
const marker = join(ROOT, 'node_modules', '.ebbtone-installed');
const fingerprint = () =>
	createHash('sha256')
		.update(readFileSync(lockfile))
		.update(process.versions.modules)
		.digest('hex');

/** True when node_modules was installed from this lockfile. */
function isInstalled() {
	if (existsSync(marker)) return readFileSync(marker, 'utf8') === fingerprint();
	// Installed by hand with npm: it keeps its own record, newer than the lockfile it came from.
	const record = join(ROOT, 'node_modules', '.package-lock.json');
	return existsSync(record) && statSync(record).mtimeMs >= statSync(lockfile).mtimeMs;
}

const pause = (milliseconds) =>
	Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0, milliseconds);

function isAlive(pid) {
	try {
		process.kill(pid, 0);
		return true;
	} catch (problem) {
		return problem.code === 'EPERM';
	}
}

/** Runs the work while no other bootstrap of this clone does; waits for one that is at it. */
function alone(work) {
	const state = join(ROOT, '.ebbtone');
	mkdirSync(state, { recursive: true, mode: 0o711 });
	const lock = join(state, 'install.lock');
	for (;;) {
		try {
			writeFileSync(lock, String(process.pid), { flag: 'wx' });
			break;
		} catch (problem) {
			if (problem.code !== 'EEXIST') throw problem;
			const holder = existsSync(lock) ? Number(readFileSync(lock, 'utf8')) : 0;
			if (holder > 0 && !isAlive(holder)) rmSync(lock, { force: true });
			pause(500);
		}
	}
	try {
		return work();
	} finally {
		rmSync(lock, { force: true });
	}
}

function install() {
	if (isInstalled()) return;
	console.error('Installing packages (npm ci) …');
	// The development packages build and test the application, also where NODE_ENV is production.
	const npm = process.env.npm_execpath;
	const args = ['ci', '--include=dev', '--no-audit', '--no-fund'];
	const options = { cwd: ROOT, stdio: ['ignore', 2, 2] };
	const done =
		npm && /\.c?js$/.test(npm)
			? spawnSync(process.execPath, [npm, ...args], options)
			: spawnSync('npm', args, options);
	if (done.status !== 0) {
		console.error('The packages could not be installed; the reason stands above.');
		process.exit(1);
	}
	writeFileSync(marker, fingerprint());
}

if (!isInstalled()) alone(install);

const tsx = pathToFileURL(join(ROOT, 'node_modules', 'tsx', 'dist', 'loader.mjs')).href;
const child = spawn(process.execPath, ['--import', tsx, join(ROOT, COMMANDS[command]), ...rest], {
	cwd: ROOT,
	stdio: 'inherit',
	env: { ...process.env, TSX_TSCONFIG_PATH: join(ROOT, '.config', 'tsconfig.cli.json') }
});

// Ctrl-C reaches the child by itself when it comes from the terminal; the child takes the second one
// calmly. A signal sent to this process alone is handed on.
for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) {
	process.on(signal, () => child.kill(signal));
}

/** Number of a process's parent and its program's name, where the system tells. */
function parentOf(pid) {
	try {
		const [, name, parent] = /^\d+ \((.*)\) \S (\d+)/.exec(
			readFileSync(`/proc/${pid}/stat`, 'utf8')
		);
		return { name, parent: Number(parent) };
	} catch {
		return { name: '', parent: 0 };
	}
}

// npm, and the shell between it and us, hand signals on badly. When either is gone, nobody is left
// who would stop us.
if (process.env.npm_lifecycle_event) {
	const parent = process.ppid;
	const shell = parentOf(parent);
	const npm = /sh$/.test(shell.name) ? shell.parent : 0;
	setInterval(() => {
		const gone = process.ppid !== parent || (npm > 0 && parentOf(parent).parent !== npm);
		if (gone) child.kill('SIGTERM');
	}, 1000).unref();
}

child.on('error', (problem) => {
	console.error(problem.message);
	process.exit(1);
});
child.on('exit', (code, signal) => process.exit(code ?? (signal ? 1 : 0)));
