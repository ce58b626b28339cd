import { problem } from './problem';
import { Refusal } from './refusal';

/**
 * Reads a JSON body of at most `limitBytes`, counting what really arrives. Only `application/json` is
 * taken: another site's form cannot send that without asking first.
 * @returns the value, or the problem to answer with.
 */
export async function readJson(
	request: Request,
	limitBytes: number
): Promise<{ value: unknown; refused?: undefined } | { refused: Response }> {
	const type = request.headers.get('content-type')?.split(';')[0].trim().toLowerCase();
	if (type !== 'application/json') {
		return { refused: problem(415, 'Wrong content type', 'Send application/json.') };
	}
	const bytes = await readAtMost(request, limitBytes);
	if (bytes === null) {
		const limit = `${Math.floor(limitBytes / 1000)} kB`;
		return { refused: problem(413, 'Too large', `At most ${limit} can be stored.`) };
	}
	try {
		const value: unknown = JSON.parse(new TextDecoder('utf-8', { fatal: true }).decode(bytes));
		if (isStorable(value)) return { value };
	} catch {
		// Falls through to the same answer.
	}
	return { refused: problem(400, 'Not readable', 'The body is not readable as JSON.') };
}

async function readAtMost(request: Request, limitBytes: number): Promise<Uint8Array | null> {
	if (Number(request.headers.get('content-length') ?? 0) > limitBytes) return null;
	const chunks: Uint8Array[] = [];
	let size = 0;
	const reader = request.body?.getReader();
	while (reader) {
		const { done, value } = await reader.read();
		if (done) break;
		size += value.byteLength;
		if (size > limitBytes) {
			await reader.cancel();
			return null;
		}
		chunks.push(value);
	}
	return Buffer.concat(chunks);
}

/** PostgreSQL's jsonb takes neither the zero character nor half of a surrogate pair. */
function isStorable(value: unknown): boolean {
	const waiting: unknown[] = [value];
	while (waiting.length > 0) {
		const next = waiting.pop();
		if (typeof next === 'string' && /\0|\p{Surrogate}/u.test(next)) return false;
		if (next === null || typeof next !== 'object') continue;
		for (const [key, inner] of Object.entries(next)) waiting.push(key, inner);
	}
	return true;
}

/**
 * The problem that answers a service's refusal; what is malformed or cannot be is 422.
 * @throws whatever else it is given.
 */
export function refusalProblem(error: unknown, title: string): Response {
	if (!(error instanceof Refusal)) throw error;
	return problem(error.kind === 'invalid' ? 422 : error.status, title, error.message);
}
