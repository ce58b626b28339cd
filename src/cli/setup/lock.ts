import { existsSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { ROOT, stateFolder } from './places';
import { isAlive, SetUpError } from './run';

/**
 * Makes sure that only one process of a kind runs in this clone.
 * @returns a function that gives the lock back.
 * @throws SetUpError naming the process that has it.
 */
export function takeLock(name: string, refusal: (pid: number) => string): () => void {
	const path = join(stateFolder(), `${name}.lock`);
	for (let attempt = 0; attempt < 3; attempt++) {
		try {
			writeFileSync(path, String(process.pid), { flag: 'wx' });
			return () => rmSync(path, { force: true });
		} catch (problem) {
			if ((problem as NodeJS.ErrnoException).code !== 'EEXIST') throw problem;
		}
		const holder = existsSync(path) ? Number(readFileSync(path, 'utf8')) : 0;
		if (holder > 0 && isAlive(holder) && isOurs(holder)) throw new SetUpError(refusal(holder));
		rmSync(path, { force: true });
	}
	throw new SetUpError(`The lock ${path} cannot be taken.`);
}

/** A process number lives on in other programs; ours run from this clone. Unknown counts as ours. */
function isOurs(pid: number): boolean {
	const path = `/proc/${pid}/cmdline`;
	if (!existsSync('/proc/self')) return true;
	return existsSync(path) && readFileSync(path, 'utf8').includes(join(ROOT, 'src', 'cli'));
}
