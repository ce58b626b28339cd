const SITE = 'http://site.invalid';

/** A path on this site to go on to, from a form or an address; anything else gives null. */
export function safePath(path: unknown): string | null {
	if (typeof path !== 'string' || !path.startsWith('/') || path.length > 500) return null;
	try {
		const url = new URL(path, SITE);
		const onward = url.pathname + url.search;
		// The outcome is judged, not what was given: `/..//elsewhere` turns into `//elsewhere` only here.
		return url.origin === SITE && !onward.startsWith('//') ? onward : null;
	} catch {
		return null;
	}
}
