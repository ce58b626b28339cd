import { requireRole } from '$lib/server/auth';
import { orErrorPage } from '$lib/server/error-page';
import { ownAttempt } from '$lib/server/services/attempt-reading';
import { orderOf } from '$lib/server/services/today';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const actor = requireRole(event, 'student', 'instructor');
	const [attempt, order] = await orErrorPage(
		Promise.all([ownAttempt(actor, event.params.id), orderOf(actor)])
	);
	return { attempt, order };
};
