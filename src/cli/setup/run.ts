import { spawn, spawnSync, type SpawnOptions } from 'node:child_process';

export interface Outcome {
	code: number;
	stdout: string;
	stderr: string;
}

/** Runs a short command to its end and collects what it printed; never throws on a bad exit. */
export function runQuietly(command: string, args: string[], options: SpawnOptions = {}): Outcome {
	const done = spawnSync(command, args, { cwd: '/', ...options, encoding: 'utf8', stdio: 'pipe' });
	if (done.error) return { code: 127, stdout: '', stderr: done.error.message };
	return {
		code: done.status ?? 1,
		stdout: String(done.stdout ?? ''),
		stderr: String(done.stderr ?? '')
	};
}

/** Runs a command with its output on this terminal's stderr or kept; resolves with the exit code. */
export function runAloud(
	command: string,
	args: string[],
	options: SpawnOptions = {}
): Promise<number> {
	return new Promise((resolve) => {
		const child = spawn(command, args, { stdio: ['ignore', 'inherit', 'inherit'], ...options });
		child.on('error', () => resolve(127));
		child.on('exit', (code, signal) => resolve(code ?? (signal ? 1 : 0)));
	});
}

/** True when this process may install packages and become other users. */
export const isRoot = () => process.getuid?.() === 0;

/** True while a process of that number exists. */
export function isAlive(pid: number): boolean {
	try {
		process.kill(pid, 0);
		return true;
	} catch (problem) {
		return (problem as NodeJS.ErrnoException).code === 'EPERM';
	}
}

/** A set-up step that cannot go on; the message says what the person can do. */
export class SetUpError extends Error {}
