import { requireRole } from '$lib/server/auth';
import { orderOf } from '$lib/server/services/today';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const actor = requireRole(event, 'student', 'instructor');
	return { userId: actor.id, order: await orderOf(actor) };
};
