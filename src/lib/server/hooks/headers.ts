import type { Handle } from '@sveltejs/kit';
import { usesHttps } from '../env';

/** Headers that every answer carries. The policy for pages, with its nonces, is SvelteKit's own. */
const HEADERS: Readonly<Record<string, string>> = {
	'permissions-policy':
		'microphone=(self), camera=(), geolocation=(), payment=(), usb=(), display-capture=()',
	'x-content-type-options': 'nosniff',
	'x-frame-options': 'DENY',
	'referrer-policy': 'strict-origin-when-cross-origin',
	'cross-origin-opener-policy': 'same-origin',
	'cross-origin-resource-policy': 'same-origin'
};

export const securityHeaders: Handle = async ({ event, resolve }) => {
	const response = await resolve(event);
	for (const [name, value] of Object.entries(HEADERS)) response.headers.set(name, value);
	// Links with a token in the path must not be told to any other site. Not 'no-referrer': with it
	// browsers send `Origin: null` with the page's own forms, which are then refused as cross-site.
	const secretLink = /^\/(invitation|join|reset)\//.test(event.url.pathname);
	if (secretLink) {
		response.headers.set('referrer-policy', 'same-origin');
	}
	if (!response.headers.has('content-security-policy')) {
		response.headers.set('content-security-policy', "default-src 'none'; frame-ancestors 'none'");
	}
	// What a signed-in person sees, or what a link in a mail opens, is kept nowhere: after signing out
	// the browser's Back key must not show it again.
	const personal = Boolean(event.locals.actor) || secretLink;
	if (personal && !response.headers.has('cache-control')) {
		response.headers.set('cache-control', 'private, no-store');
	}
	if (usesHttps()) {
		response.headers.set('strict-transport-security', 'max-age=31536000');
	}
	return response;
};
