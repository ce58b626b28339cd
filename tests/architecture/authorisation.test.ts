import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import ts from 'typescript';
import { describe, expect, it } from 'vitest';

const ROUTES = join(process.cwd(), 'src/routes');
const GUARDS = new Set(['requireActor', 'requireRole', 'publicRoute']);
const METHODS = new Set(['GET', 'HEAD', 'POST', 'PUT', 'PATCH', 'DELETE', 'OPTIONS', 'fallback']);
const SERVER_FILE = /^\+(page\.server|layout\.server|server)\.ts$/;

interface Handler {
	name: string;
	/** The function's body; null where what is exported is no function written on the spot. */
	body: ts.ConciseBody | null;
}

/** Unwraps `satisfies`, `as` and brackets. */
function bare(node: ts.Expression): ts.Expression {
	return ts.isSatisfiesExpression(node) ||
		ts.isAsExpression(node) ||
		ts.isParenthesizedExpression(node)
		? bare(node.expression)
		: node;
}

function bodyOf(node: ts.Expression | undefined): ts.ConciseBody | null {
	if (!node) return null;
	const value = bare(node);
	return ts.isArrowFunction(value) || ts.isFunctionExpression(value) ? value.body : null;
}

function actionsOf(node: ts.Expression | undefined): Handler[] {
	const object = node && bare(node);
	if (!object || !ts.isObjectLiteralExpression(object)) return [{ name: 'actions', body: null }];
	return object.properties.map((property) => {
		const name = `actions.${property.name?.getText() ?? '?'}`;
		if (ts.isPropertyAssignment(property)) return { name, body: bodyOf(property.initializer) };
		if (ts.isMethodDeclaration(property)) return { name, body: property.body ?? null };
		return { name, body: null };
	});
}

const isExported = (node: ts.HasModifiers) =>
	(ts.getModifiers(node) ?? []).some((m) => m.kind === ts.SyntaxKind.ExportKeyword);
const isHandlerName = (name: string) => name === 'load' || METHODS.has(name);

/** Every load, action and request handler that a server file of a route exports. */
export function handlersOf(file: string, text: string): Handler[] {
	const source = ts.createSourceFile(file, text, ts.ScriptTarget.Latest, true);
	const found: Handler[] = [];
	for (const statement of source.statements) {
		if (ts.isExportDeclaration(statement)) {
			// Re-exported or exported by a list: what stands behind it cannot be seen from here.
			const clause = statement.exportClause;
			const names =
				clause && ts.isNamedExports(clause) ? clause.elements.map((e) => e.name.text) : ['*'];
			for (const name of names) {
				if (name === '*' || name === 'actions' || isHandlerName(name))
					found.push({ name, body: null });
			}
		} else if (ts.isFunctionDeclaration(statement) && isExported(statement)) {
			const name = statement.name?.text ?? 'default';
			if (isHandlerName(name)) found.push({ name, body: statement.body ?? null });
		} else if (ts.isVariableStatement(statement) && isExported(statement)) {
			for (const { name, initializer } of statement.declarationList.declarations) {
				const text = name.getText();
				if (text === 'actions') found.push(...actionsOf(initializer));
				else if (isHandlerName(text)) found.push({ name: text, body: bodyOf(initializer) });
			}
		}
	}
	return found;
}

/** The function that the body's first statement calls, directly or for the value of a constant. */
function firstCall(body: ts.ConciseBody | null): string | null {
	if (!body || !ts.isBlock(body)) return null;
	const first = body.statements[0];
	let call: ts.Expression | undefined;
	if (first && ts.isExpressionStatement(first)) call = first.expression;
	if (first && ts.isVariableStatement(first)) {
		call = first.declarationList.declarations[0].initializer;
	}
	return call && ts.isCallExpression(call) && ts.isIdentifier(call.expression)
		? call.expression.text
		: null;
}

/** True when the guards' names really come from the server's auth room. */
function importsGuards(text: string): boolean {
	const imports = [...text.matchAll(/import\s*\{([^}]*)\}\s*from\s*'\$lib\/server\/auth'/g)];
	return imports.some(([, names]) => names.split(',').some((name) => GUARDS.has(name.trim())));
}

export function unguarded(file: string, text: string): string[] {
	const handlers = handlersOf(file, text);
	if (handlers.length > 0 && !importsGuards(text)) return handlers.map((handler) => handler.name);
	return handlers
		.filter(({ body }) => !GUARDS.has(firstCall(body) ?? ''))
		.map((handler) => handler.name);
}

const files = readdirSync(ROUTES, { recursive: true, encoding: 'utf8' }).filter((path) =>
	SERVER_FILE.test(path.split('/').at(-1) ?? '')
);

describe('every load, action and endpoint authorises in its first statement', () => {
	it('finds the server files', () => {
		expect(files.length).toBeGreaterThan(10);
	});

	it.each(files)('%s', (file) => {
		const text = readFileSync(join(ROUTES, file), 'utf8');
		const handlers = handlersOf(file, text);
		expect(handlers.length, 'a server file without a handler').toBeGreaterThan(0);
		expect(unguarded(file, text)).toEqual([]);
	});
});

describe('the check itself', () => {
	const auth = "import { requireActor, requireRole, publicRoute } from '$lib/server/auth';\n";

	it.each([
		[
			'a load',
			'export const load = async (event) => { const x = await read(); requireActor(event); };',
			['load']
		],
		['a load without a block', 'export const load = (event) => requireActor(event);', ['load']],
		[
			'an endpoint',
			'export async function POST(event) { return json(await store(event)); }',
			['POST']
		],
		[
			'an action',
			'export const actions = { default: async (e) => { requireActor(e); }, drop: async (e) => { await drop(e); } };',
			['actions.drop']
		],
		[
			'an action as a method',
			'export const actions = { async keep(e) { await keep(e); } } satisfies Actions;',
			['actions.keep']
		],
		['a load made elsewhere', 'export const load = makeLoad();', ['load']],
		['a re-export', "export { load } from './other';", ['load']],
		['everything of another file', "export * from './other';", ['*']],
		[
			'a guard inside a condition',
			'export const load = (e) => { if (e.x) requireActor(e); };',
			['load']
		]
	])('sees %s that does not', (_what, text, names) => {
		expect(unguarded('x.ts', auth + text)).toEqual(names);
	});

	it('sees a guard of another origin', () => {
		const text =
			"import { requireActor } from './mine';\nexport const load = (e) => { requireActor(e); return {}; };";
		expect(unguarded('x.ts', text)).toEqual(['load']);
	});

	it('lets guarded ones pass', () => {
		const text = `${auth}
			export const load: PageServerLoad = async (event) => { const actor = requireRole(event, 'admin'); return {}; };
			export const actions: Actions = { default: async (event) => { publicRoute(event); } };
			export function GET(event) { publicRoute(event); return json({}); }
			export const prerender = false;`;
		expect(unguarded('x.ts', text)).toEqual([]);
	});
});
