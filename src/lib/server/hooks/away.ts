import type { Handle } from '@sveltejs/kit';
import { problem } from '../problem';

/** When to come again, seconds. */
const RETRY_SECONDS = 10;

/**
 * While the database does not answer, neither do we: 503 instead of 500, so that balancers, the
 * outbox and people know that nothing is wrong with what they asked.
 */
export const sayWhenAway: Handle = async ({ event, resolve }) => {
	const response = await resolve(event);
	if (!event.locals.databaseAway || (response.status !== 500 && response.status !== 503)) {
		return response;
	}
	const answer = event.url.pathname.startsWith('/api/')
		? problem(503, 'The database does not answer', 'Nothing is lost. Try again in a moment.')
		: new Response(response.body, { status: 503, headers: response.headers });
	answer.headers.set('retry-after', String(RETRY_SECONDS));
	answer.headers.set('cache-control', 'no-store');
	return answer;
};
