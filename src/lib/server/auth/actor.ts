import { error, redirect } from '@sveltejs/kit';

export const ROLES = ['student', 'instructor', 'admin'] as const;
export type Role = (typeof ROLES)[number];

/** The signed-in person, as read from the database for this very request. */
export interface Actor {
	id: string;
	email: string;
	name: string;
	role: Role;
	sessionVersion: number;
}

/** What authorisation needs to know of a request; a part of SvelteKit's RequestEvent. */
export interface AuthorisedEvent {
	locals: { actor: Actor | null; databaseAway?: boolean };
	url: URL;
	request: { method: string };
}

const isApi = (event: AuthorisedEvent) => event.url.pathname.startsWith('/api/');

/**
 * The signed-in person. Must be the first statement of every load, action and endpoint that is not
 * public. Pages send strangers to the sign-in page and back afterwards; /api answers 401.
 */
export function requireActor(event: AuthorisedEvent): Actor {
	const actor = event.locals.actor;
	if (actor) return actor;
	if (event.locals.databaseAway) error(503, 'The database does not answer. Nothing is lost.');
	if (isApi(event)) error(401, 'Sign in first.');
	const back =
		event.request.method === 'GET' ? event.url.pathname + event.url.search : event.url.pathname;
	redirect(303, `/sign-in?redirectTo=${encodeURIComponent(back)}`);
}

/** Like requireActor, and the person must have one of these roles; otherwise 403. */
export function requireRole(event: AuthorisedEvent, ...roles: Role[]): Actor {
	const actor = requireActor(event);
	if (!roles.includes(actor.role)) error(403, 'Your account has no access to this page.');
	return actor;
}

/** Marks a load, action or endpoint as open to everybody, on purpose. Null for a stranger. */
export function publicRoute(event: Pick<AuthorisedEvent, 'locals'>): Actor | null {
	return event.locals.actor;
}

/** Where a person starts after signing in. */
export function homeOf(role: Role): string {
	return { student: '/today', instructor: '/classes', admin: '/admin/users' }[role];
}
