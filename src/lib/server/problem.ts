/** Problem details of RFC 9457. */
export interface Problem {
	type: string;
	title: string;
	status: number;
	detail?: string;
	[extension: string]: unknown;
}

/**
 * An error answer for /api as RFC 9457 problem details.
 * @param status HTTP status, 400-599.
 * @param title what went wrong, the same for each occurrence of the kind.
 * @param detail a sentence for the person, about this occurrence.
 */
export function problem(
	status: number,
	title: string,
	detail?: string,
	extensions: Record<string, unknown> = {}
): Response {
	const body: Problem = { type: 'about:blank', title, status, ...extensions };
	if (detail) body.detail = detail;
	return new Response(JSON.stringify(body), {
		status,
		headers: { 'content-type': 'application/problem+json', 'cache-control': 'no-store' }
	});
}
