import type { Handle } from '@sveltejs/kit';
import { env } from '../env';
import { problem } from '../problem';

const READING = new Set(['GET', 'HEAD', 'OPTIONS']);

/** Whether a browser says that another site caused this request. */
export function isCrossSite(headers: Headers, origin: string): boolean {
	const site = headers.get('sec-fetch-site');
	if (site && site !== 'same-origin' && site !== 'none') return true;
	const from = headers.get('origin');
	return from !== null && from !== origin;
}

/**
 * Refuses writing requests that another site caused, whatever their content type: SvelteKit's own
 * check looks at forms only. Programs that are no browsers send neither header, and no cookies
 * unless told to.
 */
export const refuseCrossSite: Handle = async ({ event, resolve }) => {
	const { request } = event;
	if (!READING.has(request.method) && isCrossSite(request.headers, event.url.origin)) {
		return problem(403, 'Refused', 'This request was sent by another site.');
	}
	return resolve(event);
};

/**
 * People may type 127.0.0.1 for localhost; forms would then be refused, because the origin differs
 * from the one address. So a page asked for under another loopback name moves to the one address.
 */
export const oneAddress: Handle = async ({ event, resolve }) => {
	const host = event.request.headers.get('host');
	const wanted = new URL(env().ORIGIN);
	if (
		host !== null &&
		host !== wanted.host &&
		event.request.headers.get('sec-fetch-mode') === 'navigate' &&
		event.request.method === 'GET' &&
		isLoopback(hostname(host)) &&
		isLoopback(wanted.hostname)
	) {
		const location = wanted.origin + event.url.pathname + event.url.search;
		return new Response(null, { status: 307, headers: { location } });
	}
	return resolve(event);
};

const hostname = (host: string) => host.replace(/:\d+$/, '');
const isLoopback = (name: string) => ['localhost', '127.0.0.1', '[::1]'].includes(name);
