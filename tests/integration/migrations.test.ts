import { randomUUID } from 'node:crypto';
import { QueryTypes, type Sequelize } from 'sequelize';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { bareConnection } from '../../src/lib/server/database';
import { migrate, pendingMigrations } from '../../src/lib/server/database/migrate';
import { defineModels } from '../../src/lib/server/models';

const main = process.env.DATABASE_URL as string;
const name = `migrations_${randomUUID().slice(0, 8)}`;
const url = main.replace(/\/[^/]+$/, `/${name}`);
let server: Sequelize;
let own: Sequelize;

beforeAll(async () => {
	server = bareConnection(main);
	await server.query(`CREATE DATABASE ${name}`);
	own = bareConnection(url);
});
afterAll(async () => {
	await own.close();
	await server.query(`DROP DATABASE ${name} WITH (FORCE)`);
	await server.close();
});

const tables = async () =>
	(
		await own.query<{ t: string }>(
			"SELECT table_name AS t FROM information_schema.tables WHERE table_schema = 'public' ORDER BY 1",
			{ type: QueryTypes.SELECT }
		)
	).map((row) => row.t);

/** Everything about the columns that a migration decides. */
const columns = () =>
	own.query(
		`SELECT table_name, column_name, data_type, is_nullable, column_default
		FROM information_schema.columns WHERE table_schema = 'public' ORDER BY 1, 2`,
		{ type: QueryTypes.SELECT }
	);

describe('the schema', () => {
	it('goes forward, all the way back leaving nothing, and forward again to the same', async () => {
		const steps = await migrate(url, 'up');
		expect(steps.length).toBeGreaterThanOrEqual(2);
		expect(await migrate(url, 'up')).toEqual([]);
		expect(await pendingMigrations(url)).toEqual([]);
		const first = await columns();
		expect(await migrate(url, 'to-nothing')).toEqual([...steps].reverse());
		expect(await tables()).toEqual(['schema_migration']);
		const left = await own.query("SELECT 1 FROM pg_extension WHERE extname = 'citext'", {
			type: QueryTypes.SELECT
		});
		expect(left).toEqual([]);
		expect(await migrate(url, 'up')).toEqual(steps);
		expect(await columns()).toEqual(first);
	});

	it('goes back one step at a time', async () => {
		const all = await tables();
		const [newest, ...more] = await migrate(url, 'down');
		expect(more).toEqual([]);
		expect((await tables()).length).toBeLessThan(all.length);
		expect(await pendingMigrations(url)).toEqual([newest]);
		expect(await migrate(url, 'up')).toEqual([newest]);
		expect(await tables()).toEqual(all);
	});

	it('is brought forward once when two servers start at the same moment', async () => {
		await migrate(url, 'to-nothing');
		const done = await Promise.all([migrate(url, 'up'), migrate(url, 'up'), migrate(url, 'up')]);
		const steps = done.flat();
		expect(new Set(steps).size).toBe(steps.length);
		expect(await pendingMigrations(url)).toEqual([]);
	});

	it('has a column for every attribute of every model', async () => {
		const models = bareConnection(url);
		defineModels(models);
		try {
			for (const model of Object.values(models.models)) {
				await expect(model.findOne(), model.name).resolves.not.toBeUndefined();
			}
		} finally {
			await models.close();
		}
	});
});

describe('the database itself refuses', () => {
	const id = randomUUID();
	beforeAll(async () => {
		await migrate(url, 'up');
		await own.query(
			`INSERT INTO "user" (id, email, name, role) VALUES ('${id}', 'Ada@studio.example', 'Ada', 'student')`
		);
		await own.query(`INSERT INTO class (id, name) VALUES ('${id}', 'Class')`);
		await own.query(
			`INSERT INTO membership (class_id, user_id, role) VALUES ('${id}', '${id}', 'student')`
		);
	});

	const user = (values: string) => `INSERT INTO "user" (email, name, role) VALUES (${values})`;
	const invitation = (values: string) =>
		`INSERT INTO invitation (class_id, email, token_hash, expires_at) VALUES (${values})`;
	const hash = (letter: string) => `'${letter.repeat(64)}'`;

	it.each([
		['a role that does not exist', user("'b@studio.example', 'B', 'owner'"), /user_role_check/],
		[
			'the same address in other letters',
			user("'ADA@STUDIO.EXAMPLE', 'B', 'student'"),
			/unique|Validation/
		],
		['an empty name', user("'c@studio.example', '  ', 'student'"), /user_name_check/],
		['no address', user("NULL, 'C', 'student'"), /null|notNull/i],
		['a thing that is no address', user("'nobody', 'C', 'student'"), /user_email_check/],
		[
			'a class that ends before it starts',
			"INSERT INTO class (name, starts_on, ends_on) VALUES ('C', '2026-02-02', '2026-02-01')",
			/class_dates/
		],
		[
			'a second membership of one person',
			`INSERT INTO membership (class_id, user_id, role) VALUES ('${id}', '${id}', 'instructor')`,
			/unique|Validation/
		],
		[
			'a membership of nobody',
			`INSERT INTO membership (class_id, user_id, role) VALUES ('${id}', '${randomUUID()}', 'student')`,
			/foreign key/
		],
		[
			'an invitation to nowhere',
			invitation(`'${randomUUID()}', 'd@studio.example', ${hash('a')}, now() + interval '1 day'`),
			/foreign key/
		],
		[
			'an invitation that has expired before it was written',
			invitation(`'${id}', 'd@studio.example', ${hash('b')}, now() - interval '1 day'`),
			/invitation_lifetime/
		],
		[
			'a token that is not a hash',
			invitation(`'${id}', 'd@studio.example', 'plain', now() + interval '1 day'`),
			/invitation_token_hash_check/
		],
		[
			'a mail that is waiting without a body',
			"INSERT INTO mail_outbox (kind, recipient, subject) VALUES ('reset', 'd@studio.example', 'x')",
			/mail_outbox_body/
		],
		[
			'a deed without a verb',
			"INSERT INTO audit_entry (action) VALUES ('something')",
			/audit_entry_action_check/
		],
		[
			'a tolerance of nothing',
			"INSERT INTO tolerance_set (level, fork_cents, temperament_cents, low_and_sixth_octave_cents, seventh_octave_cents, unison_cents, moved_by_blows_cents) VALUES ('learning', 0, 1, 1, 1, 1, 1)",
			/fork_cents_check/
		]
	])('%s', async (_what, sql, reason) => {
		await expect(own.query(sql)).rejects.toThrow(reason);
	});
});
