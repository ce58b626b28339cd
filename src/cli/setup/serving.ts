import { randomBytes } from 'node:crypto';
import { cpSync, readdirSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { isAlive } from './run';

/**
 * Copies a build for one server alone. A server reads many of its files only when they are asked for;
 * without a copy, the next build (that of `npm test`, say) would take them away under it. Copies whose
 * maker has died are deleted.
 * @param build folder that holds the built application.
 * @param state folder in which the copy is made; it must lie where the build finds its packages.
 * @returns the copy's folder.
 */
export function copyForServing(build: string, state: string): string {
	for (const name of readdirSync(state)) {
		const maker = Number(/^serving-(\d+)-/.exec(name)?.[1]);
		if (maker && !isAlive(maker)) rmSync(join(state, name), { recursive: true, force: true });
	}
	const copy = join(state, `serving-${process.pid}-${randomBytes(3).toString('hex')}`);
	cpSync(build, copy, { recursive: true });
	return copy;
}
