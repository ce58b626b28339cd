/**
 * Playwright's global set-up: the built application, served with a demo of its own, stopped at the
 * end. EBBTONE_E2E_SERVED (the line that serve.ts printed, or a file that holds it) makes the tests
 * use an application that is open already.
 */
import { spawn } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { createInterface } from 'node:readline';
import { fileURLToPath } from 'node:url';
import type { ServedApplication } from './serve';

const here = (path: string) => fileURLToPath(new URL(path, import.meta.url));

export default async function setUp(): Promise<() => Promise<void>> {
	const open = process.env.EBBTONE_E2E_SERVED;
	if (open) {
		tell(JSON.parse(open.startsWith('{') ? open : readFileSync(open, 'utf8')));
		return async () => {};
	}
	const server = spawn(
		process.execPath,
		[
			here('../../node_modules/tsx/dist/cli.mjs'),
			'--tsconfig',
			here('../../.config/tsconfig.cli.json'),
			here('serve.ts')
		],
		{ stdio: ['pipe', 'pipe', 'inherit'] }
	);
	const ended = new Promise<void>((resolve) => server.on('exit', () => resolve()));
	const line = await Promise.race([
		new Promise<string>((resolve) => createInterface(server.stdout).once('line', resolve)),
		ended.then(() => null)
	]);
	if (line === null) throw new Error('The application did not start; the reason stands above.');
	tell(JSON.parse(line));
	return async () => {
		server.stdin.end();
		await ended;
	};
}

/** The tests' own processes read where the application is from the environment. */
function tell(served: ServedApplication): void {
	process.env.EBBTONE_E2E_ORIGIN = served.origin;
	process.env.EBBTONE_E2E_MAIL = served.mailFolder;
}
