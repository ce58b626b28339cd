import { createServer } from 'node:net';

function tryPort(port: number, host: string): Promise<number | null> {
	return new Promise((resolve) => {
		const probe = createServer();
		probe.unref();
		probe.once('error', () => resolve(null));
		probe.listen({ port, host, exclusive: true }, () => {
			const address = probe.address();
			const got = typeof address === 'object' && address ? address.port : port;
			probe.close(() => resolve(got));
		});
	});
}

/** True when nothing listens on that port of that address. */
export async function isFree(port: number, host = '127.0.0.1'): Promise<boolean> {
	return (await tryPort(port, host)) !== null;
}

/** A free TCP port of the address: the preferred one if it is free, otherwise any. */
export async function freePort(preferred = 0, host = '127.0.0.1'): Promise<number> {
	const got = (await tryPort(preferred, host)) ?? (await tryPort(0, host));
	if (got === null) throw new Error(`No free port on ${host}.`);
	return got;
}
