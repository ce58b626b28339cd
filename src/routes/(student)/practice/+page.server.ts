import { requireRole } from '$lib/server/auth';
import { courseRecords } from '$lib/server/services/today';
import { nextWork, otherWork } from '$lib/course';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const actor = requireRole(event, 'student', 'instructor');
	const records = await courseRecords(actor);
	const now = Date.now();
	return { next: nextWork(records, now), others: otherWork(records, now) };
};
