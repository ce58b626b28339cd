import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { UsageError, parseCommandLine, pathFromCaller, readBytes, readJson } from './arguments';

describe('command line', () => {
	it('reads words, options in both forms, and flags', () => {
		expect(
			parseCommandLine(
				['a.wav', '--kind', 'note', '--notes=A3,C#4', '--quick'],
				['kind', 'notes'],
				['quick']
			)
		).toEqual({ words: ['a.wav'], options: { kind: 'note', notes: 'A3,C#4', quick: 'true' } });
	});

	it.each([
		[['--what', 'x'], /unknown option --what/],
		[['--kind'], /--kind needs a value/],
		[['--kind', 'a', '--kind', 'b'], /given twice/],
		[['--constructor', 'x'], /unknown option --constructor/]
	])('refuses %j', (argv, message) => {
		expect(() => parseCommandLine(argv, ['kind'])).toThrow(UsageError);
		expect(() => parseCommandLine(argv, ['kind'])).toThrow(message);
	});
});

describe('files named by the person', () => {
	let folder: string;
	const before = process.env.INIT_CWD;
	beforeEach(() => {
		folder = mkdtempSync(join(tmpdir(), 'arguments-'));
		process.env.INIT_CWD = folder;
	});
	afterEach(() => {
		rmSync(folder, { recursive: true });
		if (before === undefined) delete process.env.INIT_CWD;
		else process.env.INIT_CWD = before;
	});

	it('are relative to where the person stands', () => {
		writeFileSync(join(folder, 'model.json'), '{"inharmonicity":0}');
		expect(pathFromCaller('model.json')).toBe(join(folder, 'model.json'));
		expect(pathFromCaller('/tmp/x')).toBe('/tmp/x');
		expect(readJson('model.json')).toEqual({ inharmonicity: 0 });
	});

	it('fail with a sentence when missing, a folder, or not JSON', () => {
		writeFileSync(join(folder, 'bad.json'), '{');
		expect(() => readBytes('none.json')).toThrow(/cannot read none\.json: there is no such file/);
		expect(() => readBytes('.')).toThrow(/it is a folder/);
		expect(() => readJson('bad.json')).toThrow(/bad\.json is not JSON/);
	});
});
