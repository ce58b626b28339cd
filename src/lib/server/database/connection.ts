import { Sequelize } from 'sequelize';
import { env } from '../env';
import { defineModels } from '../models';

let instance: Sequelize | undefined;

/** A connection pool without models: for migrations and administration. */
export function bareConnection(url: string, poolSize = 2): Sequelize {
	return new Sequelize(url, {
		dialect: 'postgres',
		logging: false,
		pool: { max: poolSize, min: 0, idle: 10_000 },
		define: { underscored: true, freezeTableName: true }
	});
}

/**
 * The application's database: one pool a process, opened at the first call, with all models defined.
 * Models are used through their classes (`User.findByPk(...)`) after this has been called once.
 */
export function database(): Sequelize {
	if (instance) return instance;
	const settings = env();
	instance = bareConnection(settings.DATABASE_URL, settings.DATABASE_POOL);
	defineModels(instance);
	return instance;
}

/** Closes the pool; the next call of database() opens a new one. */
export async function closeDatabase(): Promise<void> {
	const closing = instance;
	instance = undefined;
	await closing?.close();
}
