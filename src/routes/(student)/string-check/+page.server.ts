import { requireRole } from '$lib/server/auth';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = (event) => {
	const actor = requireRole(event, 'student', 'instructor');
	return { userId: actor.id };
};
