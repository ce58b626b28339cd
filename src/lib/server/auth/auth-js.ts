import { CredentialsSignin, SvelteKitAuth } from '@auth/sveltekit';
import Credentials from '@auth/sveltekit/providers/credentials';
import { isRedirect, type RequestEvent } from '@sveltejs/kit';
import { env, usesHttps } from '../env';
import { log } from '../log';
import { Refusal } from '../refusal';
import { actorOfSession, authenticate } from '../services/accounts';
import type { Actor } from './actor';
import { SESSION_SECONDS } from './session';

class TooMany extends CredentialsSignin {
	constructor(readonly sentence: string) {
		super(sentence);
	}
	override code = 'too-many';
}

async function authorize(given: Partial<Record<string, unknown>>, event: RequestEvent) {
	const { email, password } = given;
	if (typeof email !== 'string' || typeof password !== 'string') return null;
	try {
		const actor = await authenticate(email, password, event.getClientAddress());
		event.locals.actor = actor;
		return actor && { id: actor.id, sessionVersion: actor.sessionVersion };
	} catch (problem) {
		// The limit is kept here, not in the form's action: this is the only way in.
		if (problem instanceof Refusal) throw new TooMany(problem.message);
		throw problem;
	}
}

const auth = SvelteKitAuth(async (event) => ({
	trustHost: true,
	secret: env().AUTH_SECRET,
	useSecureCookies: usesHttps(),
	session: { strategy: 'jwt', maxAge: SESSION_SECONDS },
	pages: { signIn: '/sign-in', signOut: '/sign-out', error: '/sign-in' },
	providers: [
		Credentials({
			credentials: { email: {}, password: {} },
			authorize: (given) => authorize(given, event)
		})
	],
	callbacks: {
		async jwt({ token, user }) {
			if (user) {
				const { sessionVersion } = user as { sessionVersion?: number };
				return { sub: user.id, sessionVersion };
			}
			return (await actorOfSession(token.sub, token.sessionVersion)) ? token : null;
		}
	},
	logger: {
		error: (problem) => {
			if (!(problem instanceof CredentialsSignin)) log().error({ reason: problem.message }, 'auth');
		},
		// Its only warnings are about settings that are meant as they are.
		warn: () => {},
		debug: () => {}
	}
}));

/** Gives event.locals.auth(), which renews the session's cookie. */
export const authHandle = auth.handle;

function withForm(event: RequestEvent, fields: Record<string, string>): RequestEvent {
	const headers = new Headers(event.request.headers);
	headers.delete('content-length');
	headers.set('content-type', 'application/x-www-form-urlencoded');
	const body = new URLSearchParams(fields);
	const request = new Request(event.request.url, { method: 'POST', headers, body });
	return Object.create(event, { request: { value: request, enumerable: true } }) as RequestEvent;
}

async function runAuth(run: () => unknown): Promise<void> {
	try {
		await run();
	} catch (outcome) {
		// Auth.js has set its cookies by now and wants to redirect; where to is the route's decision.
		if (!isRedirect(outcome)) throw outcome;
	}
}

/**
 * Begins a session for whoever has this address and password, and sets its cookie.
 * @returns the person, or a sentence why not with its HTTP status.
 */
export async function beginSession(
	event: RequestEvent,
	email: string,
	password: string
): Promise<{ actor: Actor; refused?: undefined } | { refused: string; status: 401 | 429 }> {
	event.locals.actor = null;
	try {
		const fields = { providerId: 'credentials', email, password, redirectTo: '/' };
		await runAuth(() => auth.signIn(withForm(event, fields)));
	} catch (problem) {
		if (problem instanceof TooMany) return { refused: problem.sentence, status: 429 };
		if (!(problem instanceof CredentialsSignin)) throw problem;
	}
	const { actor } = event.locals;
	if (actor) return { actor };
	return { refused: 'This address and password do not belong together.', status: 401 };
}

/** Ends this browser's session. */
export async function endSession(event: RequestEvent): Promise<void> {
	await runAuth(() => auth.signOut(withForm(event, { redirectTo: '/' })));
	event.locals.actor = null;
}
