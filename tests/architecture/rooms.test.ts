/**
 * The import rules bite: a planted forbidden import is found, `$lib` resolves, and imports of types inside
 * components (which the import checker does not see) obey the same borders.
 */
import { cruise, type ICruiseOptions, type ICruiseResult } from 'dependency-cruiser';
import extractTSConfig from 'dependency-cruiser/config-utl/extract-ts-config';
import { mkdirSync, mkdtempSync, readFileSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { tmpdir } from 'node:os';
import { dirname, join, relative } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterEach, describe, expect, it } from 'vitest';

const root = fileURLToPath(new URL('../..', import.meta.url));
const configuration = createRequire(import.meta.url)('../../.config/dependency-cruiser.cjs');

let folder = '';
afterEach(() => {
	if (folder) rmSync(folder, { recursive: true, force: true });
});

function plant(files: Record<string, string>): string {
	folder = mkdtempSync(join(tmpdir(), 'rooms-'));
	for (const [path, text] of Object.entries(files)) {
		mkdirSync(dirname(join(folder, path)), { recursive: true });
		writeFileSync(join(folder, path), text);
	}
	return folder;
}

async function violations(baseDir: string): Promise<string[]> {
	const options: ICruiseOptions = {
		baseDir,
		validate: true,
		ruleSet: { forbidden: configuration.forbidden },
		doNotFollow: { path: 'node_modules' },
		tsPreCompilationDeps: true
	};
	const result = await cruise(['src'], options);
	return (result.output as ICruiseResult).summary.violations.map(
		(violation) => violation.rule.name
	);
}

describe('the import rules', () => {
	it.each([
		[
			'acoustics-imports-nothing',
			'src/lib/acoustics/a.ts',
			"import { b } from '../synthesis/b';\nexport const a = b;\n"
		],
		['drills', 'src/lib/drills/a.ts', "import { b } from '../synthesis/b';\nexport const a = b;\n"],
		[
			'ui-knows-no-domain',
			'src/lib/components/ui/a.ts',
			"import { b } from '../../synthesis/b';\nexport const a = b;\n"
		],
		[
			'no-unresolved',
			'src/lib/drills/a.ts',
			"import { b } from '$lib/nowhere/b';\nexport const a = b;\n"
		]
	])('find a planted breach of %s', async (rule, path, text) => {
		const baseDir = plant({ [path]: text, 'src/lib/synthesis/b.ts': 'export const b = 1;\n' });
		expect(await violations(baseDir)).toContain(rule);
	});

	it('stay silent on a lawful import', async () => {
		const baseDir = plant({
			'src/lib/synthesis/a.ts': "import { b } from '../acoustics/b';\nexport const a = b;\n",
			'src/lib/acoustics/b.ts': 'export const b = 1;\n'
		});
		expect(await violations(baseDir)).toEqual([]);
	});

	it('resolve $lib, so that none passes unseen', async () => {
		const tsConfigPath = join(root, '.config/tsconfig.depcruise.json');
		const result = await cruise(
			['src/routes'],
			{ baseDir: root, ...configuration.options, tsConfig: { fileName: tsConfigPath } },
			undefined,
			{ tsConfig: extractTSConfig(tsConfigPath) }
		);
		const edges = (result.output as ICruiseResult).modules.flatMap((module) => module.dependencies);
		const ours = edges.filter((edge) => edge.module.startsWith('$lib/'));
		expect(ours.length).toBeGreaterThan(10);
		expect(ours.filter((edge) => !edge.resolved.startsWith('src/lib/'))).toEqual([]);
	}, 120_000);
});

/** Every file under a folder, relative to the project's root. */
function filesUnder(path: string): string[] {
	return readdirSync(join(root, path), { recursive: true, withFileTypes: true })
		.filter((entry) => entry.isFile())
		.map((entry) => relative(root, join(entry.parentPath, entry.name)));
}

describe('imports inside components, those of types included', () => {
	const importsOf = (file: string) =>
		[...readFileSync(join(root, file), 'utf8').matchAll(/from\s+'([^']+)'/g)].map(
			(match) => match[1]
		);

	it('keep the server out of components and pages', () => {
		const breaches = [...filesUnder('src/lib/components'), ...filesUnder('src/routes')]
			.filter((file) => file.endsWith('.svelte'))
			.filter((file) => importsOf(file).some((path) => path.includes('lib/server')));
		expect(breaches).toEqual([]);
	});

	it('keep every other room out of components/ui', () => {
		const breaches = filesUnder('src/lib/components/ui').flatMap((file) =>
			importsOf(file)
				.filter((path) => path.startsWith('$lib/') || path.startsWith('../'))
				.filter((path) => !path.startsWith('$lib/components/ui'))
				.map((path) => `${file}: ${path}`)
		);
		expect(breaches).toEqual([]);
	});
});
