import type { Handle } from '@sveltejs/kit';
import { problem } from '../problem';

const TITLES: Readonly<Record<number, string>> = {
	400: 'Bad request',
	401: 'Not signed in',
	403: 'Not allowed',
	404: 'Not found',
	405: 'Method not allowed',
	500: 'Internal error'
};

async function messageOf(response: Response): Promise<string | undefined> {
	if (!response.headers.get('content-type')?.includes('application/json')) return undefined;
	const body: unknown = await response.json().catch(() => null);
	const message = (body as { message?: unknown } | null)?.message;
	return typeof message === 'string' ? message : undefined;
}

/** Whatever goes wrong under /api answers as RFC 9457 problem details, SvelteKit's own errors too. */
export const apiProblems: Handle = async ({ event, resolve }) => {
	const response = await resolve(event);
	if (!event.url.pathname.startsWith('/api/') || response.status < 400) return response;
	if (response.headers.get('content-type')?.includes('application/problem+json')) return response;
	const answer = problem(
		response.status,
		TITLES[response.status] ?? 'Request failed',
		await messageOf(response)
	);
	const allow = response.headers.get('allow');
	if (allow) answer.headers.set('allow', allow);
	return answer;
};
