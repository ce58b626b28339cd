import { requireRole } from '$lib/server/auth';
import { orErrorPage } from '$lib/server/error-page';
import { studentAttempt } from '$lib/server/services/attempt-reading';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const actor = requireRole(event, 'instructor');
	const { id, studentId, attemptId } = event.params;
	const attempt = await orErrorPage(studentAttempt(actor, id, studentId, attemptId));
	return { attempt, place: `/classes/${id}/students/${studentId}` };
};
