/** Every route × every role × owner and stranger, against the table in support/route-table.ts. */
import { existsSync, readdirSync } from 'node:fs';
import { join, relative, sep } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { afterAll, describe, expect, it } from 'vitest';
import { closeDatabase } from '../../src/lib/server/database';
import { eventFor, outcome } from '../support/requests';
import { ADMIN_EXPECTED, ROUTES, type Expected, type Row } from '../support/route-table';
import { makeWorld, WHO, type Who, type World } from '../support/world';

afterAll(closeDatabase);

const routesFolder = fileURLToPath(new URL('../../src/routes', import.meta.url));
const filesNamed = (pattern: RegExp) =>
	readdirSync(routesFolder, { recursive: true, withFileTypes: true })
		.filter((entry) => entry.isFile() && pattern.test(entry.name))
		.map((entry) => ({
			folder: relative(routesFolder, entry.parentPath).split(sep).join('/'),
			path: join(entry.parentPath, entry.name)
		}))
		.sort((a, b) => a.path.localeCompare(b.path));

type Handler = (event: unknown) => unknown;
interface Module {
	load?: Handler;
	actions?: Record<string, Handler>;
	[method: string]: unknown;
}

function handlersOf(module: Module): [string, Handler][] {
	const methods = ['GET', 'POST', 'PUT', 'PATCH', 'DELETE', 'OPTIONS', 'HEAD', 'fallback'];
	return [
		...(module.load ? ([['load', module.load]] as [string, Handler][]) : []),
		...Object.entries(module.actions ?? {}).map(([name, action]): [string, Handler] => [
			`actions.${name}`,
			action
		]),
		...methods
			.filter((method) => typeof module[method] === 'function')
			.map((method): [string, Handler] => [method, module[method] as Handler])
	];
}

const serverFiles = filesNamed(/^\+(page\.server|layout\.server|server)\.ts$/);
const modules = await Promise.all(
	serverFiles.map(async ({ folder, path }) => ({
		folder,
		handlers: handlersOf((await import(/* @vite-ignore */ pathToFileURL(path).href)) as Module)
	}))
);
const walk = modules.flatMap(({ folder, handlers }) =>
	handlers.map(([name, handler]) => ({ folder, name, handler }))
);
const isAdmins = (folder: string) => folder.startsWith('(admin)/');

function addressOf(folder: string, { params }: World) {
	const isStudentsOwn = folder.startsWith('(student)');
	const values: Record<string, string> = {
		id: isStudentsOwn ? params.attemptId : params.classId,
		studentId: params.studentId,
		attemptId: params.attemptId,
		token: params.token
	};
	const used: Record<string, string> = {};
	const parts = folder.split('/').filter((part) => part && !part.startsWith('('));
	const path = parts.map((part) => {
		const name = /^\[(\w+)(?:=\w+)?\]$/.exec(part)?.[1];
		if (!name) return part;
		return (used[name] = values[name] ?? '00000000-0000-4000-8000-000000000000');
	});
	return { path: `/${path.join('/')}`, params: used };
}

async function ask(
	place: { folder: string; name: string; handler: Handler },
	row: Row,
	world: World,
	who: Who
) {
	const { path, params } = addressOf(place.folder, world);
	const form = row.form?.(world) ?? (place.name.startsWith('actions.') ? {} : undefined);
	const event = eventFor<unknown>({
		actor: world.actors[who],
		path,
		params,
		form,
		json: row.json?.(world)
	});
	return outcome(() => place.handler(event));
}

function seen({ status, location }: { status: number; location?: string }): Expected {
	if (location?.startsWith('/sign-in?redirectTo=')) return 'sign-in';
	return status < 400 ? 'ok' : status;
}

describe('the table', () => {
	it('names every handler of every route file, and nothing that is not there', () => {
		const there = walk
			.filter(({ folder }) => !isAdmins(folder))
			.map(({ folder, name }) => `${folder} ${name}`);
		const named = Object.entries(ROUTES).flatMap(([folder, rows]) =>
			Object.keys(rows).map((name) => `${folder} ${name}`)
		);
		expect(named.sort()).toEqual(there.sort());
	});

	it('leaves no page of a closed group without a load that authorises', () => {
		const bare = filesNamed(/^\+page\.svelte$/)
			.filter(({ folder }) => /^\((student|instructor|admin)\)/.test(folder))
			.filter(({ path }) => {
				const server = join(path, '../+page.server.ts');
				const module = modules.find(
					({ folder }) => folder === relative(routesFolder, join(path, '..')).split(sep).join('/')
				);
				return !existsSync(server) || !module?.handlers.some(([name]) => name === 'load');
			});
		expect(bare).toEqual([]);
	});

	it('knows no universal load, which nothing would guard', () => {
		expect(filesNamed(/^\+(page|layout)\.(ts|js)$/)).toEqual([]);
	});
});

const places = walk.map((place) => [`${place.folder || '/'} ${place.name}`, place] as const);

describe('every route', () => {
	it.each(places)('%s', async (_title, place) => {
		const row = isAdmins(place.folder)
			? { expected: ADMIN_EXPECTED }
			: ROUTES[place.folder]?.[place.name];
		expect(row, 'the table has no row for this handler').toBeDefined();
		const world = await makeWorld();
		const found: Partial<Record<Who, Expected>> = {};
		// Those who may come last: what they do may change the world.
		for (const who of WHO) found[who] = seen(await ask(place, row, world, who));
		if (isAdmins(place.folder) && place.name !== 'load') {
			// An empty form has nothing an admin could do; only the others' refusal is asked here.
			expect(found.admin).not.toBe('sign-in');
			expect([401, 403]).not.toContain(found.admin);
			delete found.admin;
		}
		expect(found).toEqual(
			Object.fromEntries(WHO.filter((who) => who in found).map((who) => [who, row.expected[who]]))
		);
	});
});
