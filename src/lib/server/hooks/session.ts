import type { Handle, RequestEvent } from '@sveltejs/kit';
import { readSession, sessionCookie } from '../auth/session';
import { isDatabaseAway } from '../database/away';
import { log } from '../log';

/** Reads who is asking, from the session's cookie and the database, before anything else looks. */
export const loadActor: Handle = async ({ event, resolve }) => {
	const { actor, stale, present } = await whoAsks(event);
	event.locals.actor = actor;
	if (event.locals.databaseAway) return resolve(event);
	if (!actor && present) {
		// The cookie is of no use any more: drop it and its pieces.
		for (const { name } of event.cookies.getAll()) {
			if (name.startsWith(sessionCookie())) event.cookies.delete(name, { path: '/' });
		}
	}
	if (actor && stale && event.request.method === 'GET') await event.locals.auth();
	return resolve(event);
};

/** Nobody can be known while the database does not answer; what needs somebody then says 503. */
async function whoAsks({ request, locals }: RequestEvent) {
	try {
		return await readSession(request.headers);
	} catch (cause) {
		if (!isDatabaseAway(cause)) throw cause;
		log().error({ reason: (cause as Error).message }, 'no session can be read');
		locals.databaseAway = true;
		return { actor: null, stale: false, present: true };
	}
}

/** Auth.js would answer under /auth by itself; every way in here goes through our own pages. */
export const noAuthEndpoints: Handle = async ({ event, resolve }) => {
	if (event.url.pathname === '/auth' || event.url.pathname.startsWith('/auth/')) {
		return new Response('Not found', { status: 404 });
	}
	return resolve(event);
};
