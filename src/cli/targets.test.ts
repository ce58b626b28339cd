import { execFile } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';

const root = fileURLToPath(new URL('../..', import.meta.url));
let folder: string;
beforeAll(() => {
	folder = mkdtempSync(join(tmpdir(), 'targets-'));
});
afterAll(() => rmSync(folder, { recursive: true }));

function run(...argv: string[]): Promise<{ code: number; out: string; err: string }> {
	return new Promise((resolve) => {
		execFile(
			process.execPath,
			[
				'node_modules/tsx/dist/cli.mjs',
				'--tsconfig',
				'.config/tsconfig.cli.json',
				'src/cli/targets.ts',
				...argv
			],
			{ cwd: root, env: { ...process.env, INIT_CWD: folder }, maxBuffer: 2 ** 24 },
			(error, out, err) => resolve({ code: error ? Number(error.code) : 0, out, err })
		);
	});
}

describe('targets command', () => {
	it('prints 88 notes and beats; without stiffness the handbook table', async () => {
		const { code, out, err } = await run('--piano', '0');
		expect([code, err]).toEqual([0, '']);
		const { notes, beats } = JSON.parse(out);
		expect(notes).toHaveLength(88);
		expect(notes[0]).toEqual({
			midi: 21,
			note: 'A0',
			inharmonicity: 0,
			f1Hz: 27.5,
			centsFromEqual: 0
		});
		const third = beats.find(
			(row: { lower: string; upper: string }) => row.lower === 'F3' && row.upper === 'A3'
		);
		expect(third).toMatchObject({ lowerPartial: 5, upperPartial: 4, direction: 'wide' });
		expect(third.beatRateHz).toBeCloseTo(6.9294, 3);
	});

	it('takes a model file relative to where the person stands, a temperament and a style', async () => {
		writeFileSync(join(folder, 'mine.json'), '{"inharmonicity":{"A3":0.0003}}');
		const { code, out } = await run(
			...['--piano', 'mine.json', '--temperament', 'vallotti', '--style', 'two-one']
		);
		expect(code).toBe(0);
		const a3 = JSON.parse(out).notes[57 - 21];
		expect([a3.note, a3.inharmonicity]).toEqual(['A3', 0.0003]);
	});

	it('answers bad input with exit 2, one line on stderr, nothing on stdout', async () => {
		writeFileSync(join(folder, 'bad.json'), '{"inharmonicity":{"H3":1}}');
		const attempts = [
			[],
			['--piano', 'none.json'],
			['--piano', 'bad.json'],
			['--piano', 'long-grand', '--temperament', 'odd']
		];
		for (const { code, out, err } of await Promise.all(attempts.map((argv) => run(...argv)))) {
			expect([code, out], err).toEqual([2, '']);
			expect(err.trimEnd().split('\n')).toHaveLength(1);
			expect(err.length).toBeGreaterThan(10);
		}
	});
});
