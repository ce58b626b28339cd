import { randomBytes } from 'node:crypto';
import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { stateFolder } from './places';

/** A secret made at the first call and kept in the state folder, readable by its owner alone. */
export function keptSecret(name: string): string {
	const path = join(stateFolder(), `${name}.secret`);
	try {
		writeFileSync(path, randomBytes(36).toString('base64url'), { mode: 0o600, flag: 'wx' });
	} catch (problem) {
		if (!existsSync(path)) throw problem;
	}
	return readFileSync(path, 'utf8').trim();
}
