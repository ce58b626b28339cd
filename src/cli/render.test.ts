import { execFile } from 'node:child_process';
import { existsSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';

const root = fileURLToPath(new URL('../../', import.meta.url));
let folder = '';

beforeAll(() => {
	folder = mkdtempSync(join(tmpdir(), 'render-'));
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

interface Outcome {
	code: number;
	stdout: string;
	stderr: string;
}

/** Runs the command as npm does: from the project, the person standing in `folder`. */
function render(...args: string[]): Promise<Outcome> {
	const command = ['--import', 'tsx', 'src/cli/render.ts', ...args];
	const env = { ...process.env, INIT_CWD: folder, TSX_TSCONFIG_PATH: '.config/tsconfig.cli.json' };
	return new Promise((done) => {
		execFile(process.execPath, command, { cwd: root, env }, (error, stdout, stderr) => {
			done({ code: typeof error?.code === 'number' ? error.code : error ? 1 : 0, stdout, stderr });
		});
	});
}

function write(name: string, content: unknown): string {
	writeFileSync(
		join(folder, name),
		typeof content === 'string' ? content : JSON.stringify(content)
	);
	return name;
}

describe('render', () => {
	it('writes a float file where the person stands, and says nothing', async () => {
		const spec = write('tone.json', { seconds: 0.1, strikes: [{ note: 'A4' }] });
		expect(await render(spec, 'tone.wav')).toEqual({ code: 0, stdout: '', stderr: '' });
		const bytes = readFileSync(join(folder, 'tone.wav'));
		expect(bytes.length).toBe(58 + 4 * 4800);
		expect(bytes.readUInt16LE(22)).toBe(1);
	});

	it('writes 16 bits, a fork, an inline model and a model from a file', async () => {
		write('model.json', { inharmonicity: { A4: 0.0006 } });
		const spec = write('fork.json', {
			seconds: 0.1,
			sampleRateHz: 44_100,
			piano: 'model.json',
			format: 'int16',
			strikes: [{ fork: { hz: 440 } }, { note: 'A4', strings: [{ hz: 440.2 }] }]
		});
		expect((await render(spec, 'fork.wav')).code).toBe(0);
		expect(readFileSync(join(folder, 'fork.wav')).length).toBe(44 + 2 * 4410);
	});

	it('bad input: exit 2, one line on stderr, nothing on stdout, no file', async () => {
		write('broken.json', '{"seconds":');
		write('wrong.json', { seconds: 1, strikes: [{ note: 'H3' }] });
		write('good.json', { seconds: 0.1, strikes: [{ note: 'A4' }] });
		const outcomes = await Promise.all([
			render(),
			render('none.json', 'x.wav'),
			render('broken.json', 'x.wav'),
			render('wrong.json', 'x.wav'),
			render('good.json', 'no/where.wav')
		]);
		for (const { code, stdout, stderr } of outcomes) {
			expect(code).toBe(2);
			expect(stdout).toBe('');
			expect(stderr.trim().split('\n')).toHaveLength(1);
			expect(stderr.length).toBeGreaterThan(10);
		}
		expect(existsSync(join(folder, 'x.wav'))).toBe(false);
	});
});
