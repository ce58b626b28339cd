import type { Handle } from '@sveltejs/kit';
import { readSession, sessionCookie } from '../auth/session';

/** Reads who is asking, from the session's cookie and the database, before anything else looks. */
export const loadActor: Handle = async ({ event, resolve }) => {
	const { actor, stale, present } = await readSession(event.request.headers);
	event.locals.actor = actor;
	if (!actor && present) {
		// The cookie is of no use any more: drop it and its pieces.
		for (const { name } of event.cookies.getAll()) {
			if (name.startsWith(sessionCookie())) event.cookies.delete(name, { path: '/' });
		}
	}
	if (actor && stale && event.request.method === 'GET') await event.locals.auth();
	return resolve(event);
};

/** Auth.js would answer under /auth by itself; every way in here goes through our own pages. */
export const noAuthEndpoints: Handle = async ({ event, resolve }) => {
	if (event.url.pathname === '/auth' || event.url.pathname.startsWith('/auth/')) {
		return new Response('Not found', { status: 404 });
	}
	return resolve(event);
};
