import { readdirSync } from 'node:fs';
import { fileURLToPath, pathToFileURL } from 'node:url';
import type { QueryInterface } from 'sequelize';
import { SequelizeStorage, Umzug } from 'umzug';
import { bareConnection } from './connection';

/** One step of the schema's history: a file `NNNN-name.ts` in `migrations/`. */
export interface Migration {
	up(queryInterface: QueryInterface): Promise<void>;
	down(queryInterface: QueryInterface): Promise<void>;
}

const folder = new URL('./migrations/', import.meta.url);

function migrationFiles(): { name: string; path: string }[] {
	return readdirSync(folder)
		.filter((name) => /^\d{4}-[a-z0-9-]+\.ts$/.test(name))
		.sort()
		.map((name) => ({
			name: name.replace(/\.ts$/, ''),
			path: fileURLToPath(new URL(name, folder))
		}));
}

async function withRunner<T>(url: string, use: (runner: Umzug<QueryInterface>) => Promise<T>) {
	const sequelize = bareConnection(url, 1);
	const load = async (path: string) =>
		(await import(/* @vite-ignore */ pathToFileURL(path).href)) as Migration;
	const runner = new Umzug<QueryInterface>({
		context: sequelize.getQueryInterface(),
		storage: new SequelizeStorage({ sequelize, tableName: 'schema_migration' }),
		logger: undefined,
		migrations: migrationFiles().map(({ name, path }) => ({
			name,
			path,
			up: async ({ context }) => (await load(path)).up(context),
			down: async ({ context }) => (await load(path)).down(context)
		}))
	});
	try {
		// Two processes that start together must not run the same step twice: one connection holds the
		// lock, and the pool has only that one.
		await sequelize.query('SELECT pg_advisory_lock(4020025)');
		return await use(runner);
	} finally {
		await sequelize.close();
	}
}

/**
 * Brings the schema forward to the newest version (`up`), takes the newest step back (`down`), or all
 * of them (`to-nothing`).
 * @returns the names of the steps that were run, in the order run.
 */
export async function migrate(
	url: string,
	direction: 'up' | 'down' | 'to-nothing' = 'up'
): Promise<string[]> {
	return withRunner(url, async (runner) => {
		const done =
			direction === 'up'
				? await runner.up()
				: await runner.down(direction === 'to-nothing' ? { to: 0 } : undefined);
		return done.map((step) => step.name);
	});
}

/** Names of the steps that have not been run yet. */
export async function pendingMigrations(url: string): Promise<string[]> {
	return withRunner(url, async (runner) => (await runner.pending()).map((step) => step.name));
}
