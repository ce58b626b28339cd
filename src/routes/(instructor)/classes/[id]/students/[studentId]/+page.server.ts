import { fail, redirect } from '@sveltejs/kit';
import { message, superValidate } from 'sveltekit-superforms';
import { zod } from 'superforms-zod';
import { z } from 'zod';
import { requireRole } from '$lib/server/auth';
import { orErrorPage } from '$lib/server/error-page';
import { showRefusal, type FormMessage } from '$lib/server/forms';
import { Refusal } from '$lib/server/refusal';
import { removeStudent } from '$lib/server/services/classes';
import { dayWords } from '$lib/server/services/day-words';
import { studentProgress } from '$lib/server/services/progress';
import { LONGEST_REMARK, writeRemark } from '$lib/server/services/remarks';
import type { Actions, PageServerLoad } from './$types';

const schema = z.object({
	text: z
		.string()
		.trim()
		.min(1, 'Write something first.')
		.max(LONGEST_REMARK, `Use at most ${LONGEST_REMARK} characters.`),
	/** An attempt's id; empty for a remark in general. */
	attemptId: z.union([z.literal(''), z.uuid('Choose a block from the list.')]).default('')
});
type RemarkForm = z.infer<typeof schema>;

export const load: PageServerLoad = async (event) => {
	const actor = requireRole(event, 'instructor');
	const { id, studentId } = event.params;
	const progress = await orErrorPage(studentProgress(actor, id, studentId));
	const about = event.url.searchParams.get('about') ?? '';
	const known = progress.drills.some(({ points }) =>
		points.some(({ attemptId }) => attemptId === about)
	);
	return {
		...progress,
		sinceWords: dayWords(progress.since, new Date()),
		form: await superValidate<RemarkForm, FormMessage>(
			{ text: '', attemptId: known ? about : '' },
			zod(schema),
			{ errors: false }
		)
	};
};

export const actions: Actions = {
	remark: async (event) => {
		const actor = requireRole(event, 'instructor');
		const form = await superValidate<RemarkForm, FormMessage>(event.request, zod(schema));
		if (!form.valid) return fail(400, { form });
		const { id: classId, studentId } = event.params;
		const attemptId = form.data.attemptId || null;
		try {
			await writeRemark(actor, { classId, studentId, attemptId }, form.data.text);
		} catch (problem) {
			return showRefusal(form, problem);
		}
		form.data = { text: '', attemptId: '' };
		return message(form, { kind: 'done', text: 'Sent. It stands on the student’s Today.' });
	},
	remove: async (event) => {
		const actor = requireRole(event, 'instructor');
		try {
			await removeStudent(actor, event.params.id, event.params.studentId);
		} catch (problem) {
			if (!(problem instanceof Refusal)) throw problem;
			return fail(problem.status, { refused: problem.message });
		}
		redirect(303, `/classes/${event.params.id}`);
	}
};
