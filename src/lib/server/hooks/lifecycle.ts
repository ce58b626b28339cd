import { preparePasswords } from '../auth/password';
import { closeDatabase, database } from '../database';
import { env } from '../env';
import { log } from '../log';
import { closeTransport } from '../mail/transport';
import { startMailDelivery } from '../services/mail';

/** Opens what the server needs, and arranges that all of it is closed again. */
export async function openServer(): Promise<void> {
	env();
	await database().authenticate();
	await preparePasswords();
	const endDelivery = startMailDelivery();
	// adapter-node says this after the last request; without it the pool holds the process for 10 s.
	process.once('sveltekit:shutdown', () => {
		void (async () => {
			await endDelivery();
			closeTransport();
			await closeDatabase();
			log().info('closed');
		})().catch((problem: Error) => log().error({ reason: problem.message }, 'closing'));
	});
}
