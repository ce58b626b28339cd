import { error } from '@sveltejs/kit';
import { requireRole } from '$lib/server/auth';
import { Refusal } from '$lib/server/refusal';
import { ownAttempt } from '$lib/server/services/attempt-reading';
import { orderOf } from '$lib/server/services/today';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const actor = requireRole(event, 'student', 'instructor');
	try {
		const [attempt, order] = await Promise.all([
			ownAttempt(actor, event.params.id),
			orderOf(actor)
		]);
		return { attempt, order };
	} catch (cause) {
		if (cause instanceof Refusal) error(cause.status, cause.message);
		throw cause;
	}
};
