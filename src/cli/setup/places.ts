import { createHash } from 'node:crypto';
import { mkdirSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';

/** The clone's top folder. */
export const ROOT = resolve(fileURLToPath(new URL('../../../', import.meta.url)));

/** Everything the two commands keep between runs; git-ignored. */
export const STATE = join(ROOT, '.ebbtone');

/** Where data go that another account must reach, when that account may not enter the clone. */
export const OUTSIDE = join(
	'/var/tmp',
	`ebbtone-${createHash('sha256').update(ROOT).digest('hex').slice(0, 12)}`
);

/** Makes the state folder, for its owner alone to list; others may pass through. */
export function stateFolder(...parts: string[]): string {
	mkdirSync(STATE, { recursive: true, mode: 0o711 });
	const path = join(STATE, ...parts);
	if (parts.length > 0) mkdirSync(path, { recursive: true, mode: 0o711 });
	return path;
}
