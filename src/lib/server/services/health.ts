import { database } from '../database';

/** Whether the database answers; for balancers and for the command that starts the server. */
export async function isHealthy(): Promise<boolean> {
	try {
		await database().query('SELECT 1');
		return true;
	} catch {
		return false;
	}
}
