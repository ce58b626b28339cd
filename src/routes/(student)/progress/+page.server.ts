import { requireRole } from '$lib/server/auth';
import { ownProgress } from '$lib/server/services/progress';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const actor = requireRole(event, 'student', 'instructor');
	return ownProgress(actor);
};
