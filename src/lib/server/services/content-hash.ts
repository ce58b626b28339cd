import { createHash } from 'node:crypto';

/**
 * SHA-256 (hexadecimal) of a JSON value, the same whatever the order of its fields. Tells a repeated
 * sending from another record under the same id.
 */
export function contentHash(value: unknown): string {
	return createHash('sha256').update(canonicalJson(value)).digest('hex');
}

function canonicalJson(value: unknown): string {
	return JSON.stringify(value, (_key, inner: unknown) =>
		inner !== null && typeof inner === 'object' && !Array.isArray(inner)
			? Object.fromEntries(Object.entries(inner).sort(([a], [b]) => (a < b ? -1 : 1)))
			: inner
	);
}
