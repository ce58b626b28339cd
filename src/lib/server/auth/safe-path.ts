/** A path on this site to go on to, from a form or an address; anything else gives null. */
export function safePath(path: unknown): string | null {
	if (typeof path !== 'string' || !path.startsWith('/') || path.length > 500) return null;
	try {
		const url = new URL(path, 'http://site.invalid');
		return url.origin === 'http://site.invalid' && !/^\/[/\\]/.test(path)
			? url.pathname + url.search
			: null;
	} catch {
		return null;
	}
}
