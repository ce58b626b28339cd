import { json } from '@sveltejs/kit';
import { requireRole } from '$lib/server/auth';
import { readJson, refusalProblem } from '$lib/server/json-endpoint';
import { storeStringCheck } from '$lib/server/services/string-checks';
import type { RequestHandler } from './$types';

/** Numbers and a few sentences. */
const LARGEST_CHECK_BYTES = 64_000;

/** Stores the numbers of a string check: 201 the first time, 200 when it is sent again. */
export const POST: RequestHandler = async (event) => {
	const actor = requireRole(event, 'student', 'instructor');
	const body = await readJson(event.request, LARGEST_CHECK_BYTES);
	if (body.refused) return body.refused;
	try {
		const { id, created } = await storeStringCheck(actor, body.value);
		return json({ id }, { status: created ? 201 : 200 });
	} catch (error) {
		return refusalProblem(error, 'The string check was not stored');
	}
};
