import { readFileSync } from 'node:fs';
import { isAbsolute, resolve } from 'node:path';

/** Bad input of a command: printed as one line on stderr, exit code 2, nothing on stdout. */
export class UsageError extends Error {
	override name = 'UsageError';
}

/** Stops the command with a sentence for the person at the keyboard (exit code 2). */
export function fail(message: string): never {
	throw new UsageError(message);
}

/** What a command line holds: words in order, and `--name value` options. */
export interface CommandLine {
	words: string[];
	options: Record<string, string>;
}

/**
 * Reads `words` and `--name value` or `--name=value` options. Unknown, repeated or valueless
 * options fail.
 * @param allowed option names without the dashes
 */
export function parseCommandLine(
	argv: readonly string[],
	allowed: readonly string[],
	flags: readonly string[] = []
): CommandLine {
	const words: string[] = [];
	const options: Record<string, string> = {};
	for (let i = 0; i < argv.length; i += 1) {
		const item = argv[i];
		if (!item.startsWith('--')) {
			words.push(item);
			continue;
		}
		const [name, ...rest] = item.slice(2).split('=');
		const isFlag = flags.includes(name);
		if (!isFlag && !allowed.includes(name)) {
			fail(
				`unknown option --${name}: use ${[...allowed, ...flags].map((o) => `--${o}`).join(', ')}`
			);
		}
		if (name in options) fail(`option --${name} is given twice`);
		if (isFlag) {
			options[name] = 'true';
			continue;
		}
		const value = rest.length > 0 ? rest.join('=') : argv[++i];
		if (value === undefined || value === '') fail(`option --${name} needs a value`);
		options[name] = value;
	}
	return { words, options };
}

/** A path as the person meant it: relative to where they stand, not to the project. */
export function pathFromCaller(path: string): string {
	return isAbsolute(path) ? path : resolve(process.env.INIT_CWD ?? process.cwd(), path);
}

/** Bytes of a file named on the command line; fails with a sentence when it cannot be read. */
export function readBytes(path: string): Uint8Array {
	try {
		return readFileSync(pathFromCaller(path));
	} catch (error) {
		const code = (error as NodeJS.ErrnoException).code;
		const reason =
			code === 'ENOENT' ? 'there is no such file' : code === 'EISDIR' ? 'it is a folder' : code;
		return fail(`cannot read ${path}: ${reason}`);
	}
}

/** Parsed JSON of a file named on the command line; fails with a sentence when it is not JSON. */
export function readJson(path: string): unknown {
	const text = new TextDecoder().decode(readBytes(path));
	try {
		return JSON.parse(text);
	} catch {
		return fail(`${path} is not JSON`);
	}
}

/** Error classes of the pure rooms whose message is meant for the person. */
const PLAIN_ERRORS = [
	'UsageError',
	'PianoSpecError',
	'TargetError',
	'SpecError',
	'AudioRefusedError'
];

/**
 * Runs a command: its result goes to stdout (as JSON when it is not a text, nothing when it is
 * undefined), bad input to stderr as one line with exit code 2. Anything else that goes wrong is
 * a fault of the program: one line too, exit code 1.
 */
export async function runCommand(
	command: (argv: string[]) => unknown | Promise<unknown>
): Promise<void> {
	// A reader that stops early (`| head`) is no fault.
	process.stdout.on('error', (error: NodeJS.ErrnoException) => {
		if (error.code !== 'EPIPE') throw error;
	});
	try {
		const result = await command(process.argv.slice(2));
		if (result === undefined) return;
		const text = typeof result === 'string' ? result : JSON.stringify(result);
		process.stdout.write(`${text}\n`);
	} catch (error) {
		const { name, message } = error instanceof Error ? error : new Error(String(error));
		const plain = PLAIN_ERRORS.includes(name);
		const sentence = message.replace(/\s+/g, ' ').trim();
		process.stderr.write(`${plain ? '' : 'internal error: '}${sentence}\n`);
		process.exitCode = plain ? 2 : 1;
	}
}
