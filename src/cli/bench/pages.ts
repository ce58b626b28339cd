/** Script that the first page and a drill page load, compressed, read off the build. */
import { readFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { gzipSync } from 'node:zlib';
import { DEMO_SIGN_INS } from '../../lib/server/database/seeders';
import { startApplication } from '../application';
import { ROOT } from '../setup/places';
import { Visitor } from './browser';
import { benchLine, type BenchLine } from './line';

const CLIENT = join(ROOT, 'build', 'client');

/** Modules that a page names in its markup: preloads and the two that start it. */
function namedModules(html: string): string[] {
	const found = html.matchAll(
		/(?:href=|import\()"(?:\.{1,2}\/)*(?:\/)?(_app\/immutable\/[^"]+\.js)"/g
	);
	return [...found].map((match) => match[1]);
}

/** A module and everything that it imports statically, relative to the client's folder. */
function withImports(module: string, seen: Set<string>): void {
	if (seen.has(module)) return;
	seen.add(module);
	const text = readFileSync(join(CLIENT, module), 'utf8');
	const imports = text.matchAll(
		/(?:^|[;}\s])(?:import|export)\s*(?:[^'"()]*?from\s*)?["'](\.[^"']+\.js)["']/g
	);
	for (const match of imports) withImports(join(dirname(module), match[1]), seen);
}

function scriptKb(html: string): number {
	const seen = new Set<string>();
	for (const module of namedModules(html)) withImports(module, seen);
	if (seen.size === 0) throw new Error('The page names no script.');
	const bytes = [...seen].map((file) => gzipSync(readFileSync(join(CLIENT, file))).length);
	return bytes.reduce((sum, size) => sum + size, 0) / 1000;
}

/** A page's markup and what its Link header preloads, written as markup. */
async function markup(visitor: Visitor, path: string): Promise<string> {
	const answer = await visitor.ask(path);
	const preloads = [...(answer.headers.get('link') ?? '').matchAll(/<([^>]+\.js)>/g)];
	return preloads.map((match) => `href="${match[1]}"`).join('\n') + (await answer.text());
}

export async function lines(_quick: boolean): Promise<BenchLine[]> {
	const application = await startApplication({
		scratch: true,
		demo: true,
		say: (line) => process.stderr.write(`${line}\n`),
		env: { LOG_LEVEL: 'error' }
	});
	try {
		const visitor = new Visitor(application.origin);
		const first = await markup(visitor, '/');
		const student = DEMO_SIGN_INS.find(({ role }) => role === 'student');
		if (!student) throw new Error('The demonstration has no student.');
		await visitor.signIn(student.email, student.password);
		const drill = await markup(visitor, '/practice/unison');
		return [
			benchLine('script of the first page, gzip', scriptKb(first), 'kB', { bar: 100 }),
			benchLine('script of a drill page, gzip', scriptKb(drill), 'kB', { bar: 180 })
		];
	} finally {
		await application.stop();
	}
}
