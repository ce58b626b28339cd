import { existsSync, mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { copyForServing } from './serving';

let place: string;
beforeAll(() => {
	place = mkdtempSync(join(tmpdir(), 'ebbtone-serving-'));
});
afterAll(() => rmSync(place, { recursive: true, force: true }));

describe('the copy that a server runs from', () => {
	it('stays whole when the build is replaced', () => {
		const build = join(place, 'build');
		const state = join(place, 'state');
		mkdirSync(join(build, 'client'), { recursive: true });
		mkdirSync(state);
		writeFileSync(join(build, 'client', 'old.js'), 'old');
		const copy = copyForServing(build, state);
		rmSync(build, { recursive: true });
		expect(readFileSync(join(copy, 'client', 'old.js'), 'utf8')).toBe('old');
	});

	it('is deleted at the next start once its maker has died, and only then', () => {
		const build = join(place, 'second-build');
		const state = join(place, 'second-state');
		// Process numbers end far below this.
		const dead = join(state, 'serving-999999999-abcdef');
		for (const folder of [build, dead]) mkdirSync(folder, { recursive: true });
		const first = copyForServing(build, state);
		const second = copyForServing(build, state);
		expect(existsSync(dead)).toBe(false);
		expect(existsSync(first)).toBe(true);
		expect(second).not.toBe(first);
	});
});
