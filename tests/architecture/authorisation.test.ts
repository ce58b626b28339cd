/**
 * Every load, action and endpoint authorises in its first statement: requireActor, requireRole, or
 * publicRoute for what is open on purpose.
 */
import { readFileSync, readdirSync } from 'node:fs';
import { join, relative } from 'node:path';
import { fileURLToPath } from 'node:url';
import ts from 'typescript';
import { describe, expect, it } from 'vitest';

const root = fileURLToPath(new URL('../..', import.meta.url));
const SERVER_FILE = /^\+(page\.server|layout\.server|server)\.ts$/;
const METHODS = new Set(['GET', 'POST', 'PUT', 'PATCH', 'DELETE', 'OPTIONS', 'HEAD', 'fallback']);
const AUTHORISING = new Set(['requireActor', 'requireRole', 'publicRoute']);

type Handler = { name: string; body: ts.Node | undefined };

function unwrapped(node: ts.Expression): ts.Expression {
	if (
		ts.isSatisfiesExpression(node) ||
		ts.isAsExpression(node) ||
		ts.isParenthesizedExpression(node)
	)
		return unwrapped(node.expression);
	return node;
}

function handler(name: string, value: ts.Expression | undefined): Handler {
	const inner = value && unwrapped(value);
	return {
		name,
		body:
			inner && (ts.isArrowFunction(inner) || ts.isFunctionExpression(inner))
				? inner.body
				: undefined
	};
}

/** Loads, actions and endpoints of a route file; one whose function cannot be seen has no body. */
export function handlersIn(text: string): Handler[] {
	const file = ts.createSourceFile('route.ts', text, ts.ScriptTarget.Latest, true);
	const found: Handler[] = [];
	for (const statement of file.statements) {
		const exported = ts.canHaveModifiers(statement)
			? ts.getModifiers(statement)?.some(({ kind }) => kind === ts.SyntaxKind.ExportKeyword)
			: false;
		if (ts.isExportDeclaration(statement)) found.push({ name: 're-export', body: undefined });
		if (!exported) continue;
		if (ts.isFunctionDeclaration(statement) && statement.name) {
			const name = statement.name.text;
			if (name === 'load' || METHODS.has(name)) found.push({ name, body: statement.body });
		}
		if (!ts.isVariableStatement(statement)) continue;
		for (const { name, initializer } of statement.declarationList.declarations) {
			if (!ts.isIdentifier(name)) continue;
			if (name.text === 'load' || METHODS.has(name.text))
				found.push(handler(name.text, initializer));
			if (name.text === 'actions') found.push(...actionsIn(initializer));
		}
	}
	return found;
}

function actionsIn(initializer: ts.Expression | undefined): Handler[] {
	const value = initializer && unwrapped(initializer);
	if (!value || !ts.isObjectLiteralExpression(value)) return [{ name: 'actions', body: undefined }];
	return value.properties.map((property): Handler => {
		const name = `actions.${property.name?.getText() ?? '?'}`;
		if (ts.isMethodDeclaration(property)) return { name, body: property.body };
		return handler(name, ts.isPropertyAssignment(property) ? property.initializer : undefined);
	});
}

/** The function called by the first statement (or by the expression that is the whole body). */
function firstCall(body: ts.Node | undefined): string | null {
	if (!body) return null;
	let first: ts.Node | undefined = ts.isBlock(body) ? body.statements[0] : body;
	if (first && ts.isVariableStatement(first)) {
		first = first.declarationList.declarations[0].initializer;
	}
	if (first && ts.isExpressionStatement(first)) first = first.expression;
	if (first && ts.isAwaitExpression(first)) first = first.expression;
	if (!first || !ts.isCallExpression(first) || !ts.isIdentifier(first.expression)) return null;
	return first.expression.text;
}

export function unauthorised(text: string): string[] {
	return handlersIn(text)
		.filter(({ body }) => !AUTHORISING.has(firstCall(body) ?? ''))
		.map(({ name }) => name);
}

const routeFiles = readdirSync(join(root, 'src/routes'), { recursive: true, withFileTypes: true })
	.filter((entry) => entry.isFile() && SERVER_FILE.test(entry.name))
	.map((entry) => relative(root, join(entry.parentPath, entry.name)))
	.sort();

describe('authorisation in the first statement', () => {
	it('is looked for in every route file', () => {
		expect(routeFiles.length).toBeGreaterThan(15);
	});

	it.each(routeFiles)('%s', (file) => {
		const text = readFileSync(join(root, file), 'utf8');
		expect(handlersIn(text).length).toBeGreaterThan(0);
		expect(unauthorised(text)).toEqual([]);
	});

	it('is missed where it is missing', () => {
		expect(unauthorised('export const load = async (event) => { return {}; };')).toEqual(['load']);
		expect(
			unauthorised('export const GET = (event) => { const x = 1; requireActor(event); return x; };')
		).toEqual(['GET']);
		expect(
			unauthorised(
				'export const actions = { a: async (event) => { requireActor(event); }, b: async () => {} };'
			)
		).toEqual(['actions.b']);
		expect(unauthorised("export { load } from './elsewhere';")).toEqual(['re-export']);
		expect(unauthorised('export const POST = wrapped(async (event) => {});')).toEqual(['POST']);
		expect(
			unauthorised(
				'export async function load(event) { const a = requireRole(event, "x"); return a; }'
			)
		).toEqual([]);
	});
});
