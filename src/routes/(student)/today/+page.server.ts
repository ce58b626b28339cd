import { fail } from '@sveltejs/kit';
import { requireRole } from '$lib/server/auth';
import { Refusal } from '$lib/server/refusal';
import { dayWords } from '$lib/server/services/day-words';
import { markRemarkSeen } from '$lib/server/services/remarks';
import { todayOf } from '$lib/server/services/today';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const actor = requireRole(event, 'student', 'instructor');
	const now = new Date();
	const { remarks, ...today } = await todayOf(actor, now);
	return {
		...today,
		remarks: remarks.map((remark) => ({
			...remark,
			when: dayWords(remark.createdAt, now),
			attemptWhen: remark.attempt ? dayWords(remark.attempt.finishedAt, now) : null
		}))
	};
};

export const actions: Actions = {
	putAway: async (event) => {
		const actor = requireRole(event, 'student', 'instructor');
		const form = await event.request.formData();
		try {
			await markRemarkSeen(actor, String(form.get('remark') ?? ''));
			return { putAway: true };
		} catch (error) {
			if (error instanceof Refusal) return fail(error.status, { message: error.message });
			throw error;
		}
	}
};
