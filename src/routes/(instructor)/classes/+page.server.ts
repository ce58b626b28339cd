import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod } from 'superforms-zod';
import { z } from 'zod';
import { requireRole } from '$lib/server/auth';
import { dayField, nameField, showRefusal, type FormMessage } from '$lib/server/forms';
import { createClass, listClasses } from '$lib/server/services/classes';
import { dayWords } from '$lib/server/services/day-words';
import type { Actions, PageServerLoad } from './$types';

const schema = z.object({ name: nameField, startsOn: dayField, endsOn: dayField });
type ClassForm = z.infer<typeof schema>;

export const load: PageServerLoad = async (event) => {
	const actor = requireRole(event, 'instructor');
	const now = new Date();
	const classes = await listClasses(actor);
	return {
		form: await superValidate<ClassForm, FormMessage>(zod(schema)),
		classes: classes.map((line) => ({
			...line,
			from: line.startsOn && dayWords(line.startsOn, now),
			to: line.endsOn && dayWords(line.endsOn, now)
		}))
	};
};

export const actions: Actions = {
	default: async (event) => {
		const actor = requireRole(event, 'instructor');
		const form = await superValidate<ClassForm, FormMessage>(event.request, zod(schema));
		if (!form.valid) return fail(400, { form });
		let id: string;
		try {
			({ id } = await createClass(actor, form.data));
		} catch (problem) {
			return showRefusal(form, problem);
		}
		redirect(303, `/classes/${id}`);
	}
};
