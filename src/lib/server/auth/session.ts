import { getToken } from '@auth/core/jwt';
import { env, usesHttps } from '../env';
import { actorOfSession } from '../services/accounts';
import type { Actor } from './actor';

/** A session lasts this long after its last renewal, seconds. */
export const SESSION_SECONDS = 30 * 86_400;
/** A session in use is renewed when it is older than this, seconds. */
const RENEW_AFTER_SECONDS = 86_400;

/** Name of the session's cookie, as Auth.js builds it. */
export const sessionCookie = () => `${usesHttps() ? '__Secure-' : ''}authjs.session-token`;

/**
 * The person behind a request's session cookie. The cookie only says who and which session version;
 * everything else, the role included, is read from the database each time.
 */
export async function readSession(
	headers: Headers
): Promise<{ actor: Actor | null; stale: boolean; present: boolean }> {
	const present = (headers.get('cookie') ?? '').includes(sessionCookie());
	if (!present) return { actor: null, stale: false, present };
	const token = await getToken({
		req: { headers },
		secret: env().AUTH_SECRET,
		secureCookie: usesHttps(),
		salt: sessionCookie()
	});
	const actor = token && (await actorOfSession(token.sub, token.sessionVersion));
	const ageSeconds = Date.now() / 1000 - (token?.iat ?? 0);
	return { actor: actor || null, stale: ageSeconds > RENEW_AFTER_SECONDS, present };
}
