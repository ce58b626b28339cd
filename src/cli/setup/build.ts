import { createHash } from 'node:crypto';
import { existsSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { ROOT } from './places';
import { runAloud, SetUpError } from './run';

/** What the built application is made from. */
const SOURCES = [
	'src',
	'static',
	'package-lock.json',
	'svelte.config.js',
	'tailwind.config.ts',
	'tsconfig.json',
	'vite.config.ts'
];
const MARKER = join(ROOT, 'build', '.sources');

function* filesUnder(path: string): Generator<string> {
	if (!existsSync(path)) return;
	if (!statSync(path).isDirectory()) {
		yield path;
		return;
	}
	for (const name of readdirSync(path).sort()) yield* filesUnder(join(path, name));
}

/** Changes whenever a source is added, removed, renamed or edited. */
function fingerprint(): string {
	const hash = createHash('sha256');
	for (const source of SOURCES) {
		for (const file of filesUnder(join(ROOT, source))) {
			if (/\.test\.ts$/.test(file)) continue;
			hash.update(file.slice(ROOT.length)).update('\0').update(readFileSync(file)).update('\0');
		}
	}
	return hash.digest('hex');
}

/** Whether `build/` was made from the sources as they are now. */
export function isBuilt(): boolean {
	return (
		existsSync(join(ROOT, 'build', 'index.js')) &&
		existsSync(MARKER) &&
		readFileSync(MARKER, 'utf8') === fingerprint()
	);
}

/** Builds the application; what the builder prints goes to stderr. @returns whether it succeeded. */
export async function build(signal?: AbortSignal): Promise<boolean> {
	const before = fingerprint();
	const code = await runAloud(
		process.execPath,
		[join(ROOT, 'node_modules/vite/bin/vite.js'), 'build'],
		{
			cwd: ROOT,
			stdio: ['ignore', 2, 2],
			signal,
			env: { ...process.env, NODE_ENV: 'production' }
		}
	);
	if (code === 0) writeFileSync(MARKER, before);
	return code === 0;
}

/** Builds the application unless it is built already. */
export async function requireBuild(
	say: (line: string) => void,
	signal?: AbortSignal
): Promise<void> {
	if (isBuilt()) return;
	say('Building the application …');
	const built = await build(signal);
	signal?.throwIfAborted();
	if (!built) throw new SetUpError('The application could not be built; see above.');
}
