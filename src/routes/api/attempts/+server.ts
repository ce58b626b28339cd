import { json } from '@sveltejs/kit';
import { requireRole } from '$lib/server/auth';
import { readJson, refusalProblem } from '$lib/server/json-endpoint';
import { problem } from '$lib/server/problem';
import { listOwnAttempts } from '$lib/server/services/attempt-reading';
import { storeAttempt } from '$lib/server/services/attempts';
import type { RequestHandler } from './$types';

/** Ten trials with the longest trace that is taken; a usual block has a hundredth of it. */
const LARGEST_ATTEMPT_BYTES = 1_200_000;

/** Stores an attempt: 201 the first time, 200 with the same answer when it is sent again. */
export const POST: RequestHandler = async (event) => {
	const actor = requireRole(event, 'student', 'instructor');
	// Whose work it is, as the sender knows it: another person may have signed in in the meantime.
	const owner = event.request.headers.get('x-student-id');
	if (owner !== null && owner !== actor.id) {
		return problem(401, 'Someone else is signed in', 'This attempt belongs to another account.');
	}
	const body = await readJson(event.request, LARGEST_ATTEMPT_BYTES);
	if (body.refused) return body.refused;
	try {
		const { created, ...stored } = await storeAttempt(actor, body.value);
		return json(stored, { status: created ? 201 : 200 });
	} catch (error) {
		return refusalProblem(error, 'The attempt was not stored');
	}
};

/** The signed-in person's own attempts, newest first; `?cursor=` continues. */
export const GET: RequestHandler = async (event) => {
	const actor = requireRole(event, 'student', 'instructor');
	try {
		const page = await listOwnAttempts(actor, event.url.searchParams.get('cursor'));
		return json(page, { headers: { 'cache-control': 'private, no-store' } });
	} catch (error) {
		return refusalProblem(error, 'The list cannot be read');
	}
};
