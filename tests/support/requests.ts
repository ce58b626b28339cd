import { isHttpError, isRedirect, type RequestEvent } from '@sveltejs/kit';
import type { Actor } from '../../src/lib/server/auth';

export interface Asked {
	actor: Actor | null;
	path: string;
	params?: Record<string, string>;
	method?: string;
	/** Sent as JSON. */
	json?: unknown;
	/** Sent as it is. */
	body?: BodyInit;
	headers?: Record<string, string>;
	/** Sent as a form. */
	form?: Record<string, string>;
}

/** The part of SvelteKit's event that our loads, actions and endpoints read. */
export function eventFor<Event = RequestEvent>(asked: Asked): Event {
	const url = new URL(asked.path, 'http://localhost:3000');
	const headers = new Headers(asked.headers);
	let body = asked.body;
	if (asked.json !== undefined) {
		body = JSON.stringify(asked.json);
		if (!headers.has('content-type')) headers.set('content-type', 'application/json');
	}
	if (asked.form) body = new URLSearchParams(asked.form);
	const method = asked.method ?? (body === undefined ? 'GET' : 'POST');
	const cookies = {
		get: () => undefined,
		getAll: () => [],
		set() {},
		delete() {},
		serialize: () => ''
	};
	return {
		locals: { actor: asked.actor },
		url,
		params: asked.params ?? {},
		request: new Request(url, { method, headers, body }),
		cookies,
		route: { id: url.pathname },
		fetch,
		setHeaders() {},
		depends() {},
		parent: async () => ({}),
		untrack: <T>(use: () => T) => use(),
		getClientAddress: () => '127.0.0.1',
		isDataRequest: false,
		isSubRequest: false,
		platform: undefined
	} as Event;
}

/** What came of it: an HTTP status, also where SvelteKit's error() or redirect() was thrown. */
export async function outcome(work: () => unknown): Promise<{ status: number; location?: string }> {
	try {
		const value = await work();
		if (value instanceof Response) return { status: value.status };
		const failed = value as { status?: unknown; data?: unknown } | undefined;
		if (failed && typeof failed.status === 'number' && 'data' in failed) {
			return { status: failed.status };
		}
		return { status: 200 };
	} catch (error) {
		if (isRedirect(error)) return { status: error.status, location: error.location };
		if (isHttpError(error)) return { status: error.status };
		throw error;
	}
}
