import { preparePasswords } from '../auth/password';
import { closeDatabase, database } from '../database';
import { env } from '../env';
import { log } from '../log';
import { closeTransport } from '../mail/transport';
import { startMailDelivery } from '../services/mail';

/**
 * `npm start` names its own process. When that is gone without a word, the database it ran goes next:
 * a server that lived on would hold the address and answer with nothing but failures.
 */
function endWithStarter(): void {
	const starter = Number(process.env.STARTED_BY);
	if (!starter) return;
	const watch = setInterval(() => {
		if (process.ppid === starter) return;
		clearInterval(watch);
		process.kill(process.pid, 'SIGTERM');
	}, 1000);
	watch.unref();
}

/** Opens what the server needs, and arranges that all of it is closed again. */
export async function openServer(): Promise<void> {
	env();
	endWithStarter();
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
