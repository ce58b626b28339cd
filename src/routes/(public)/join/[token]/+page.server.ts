import { fail, redirect } from '@sveltejs/kit';
import { message, superValidate } from 'sveltekit-superforms';
import { zod } from 'superforms-zod';
import { z } from 'zod';
import { publicRoute, requireActor } from '$lib/server/auth';
import { emailField, showRefusal, type FormMessage } from '$lib/server/forms';
import { Refusal } from '$lib/server/refusal';
import { askByLink, joinByLink, readJoinLink } from '$lib/server/services/join-links';
import type { Actions, PageServerLoad } from './$types';

const schema = z.object({ email: emailField });
type Newcomer = z.infer<typeof schema>;

export const load: PageServerLoad = async (event) => {
	const actor = publicRoute(event);
	const token = event.params.token;
	try {
		const link = await readJoinLink(token, event.getClientAddress());
		const form = await superValidate<Newcomer, FormMessage>(zod(schema));
		return { link, form, token, name: actor?.name ?? null, refused: null };
	} catch (problem) {
		if (!(problem instanceof Refusal)) throw problem;
		return { link: null, form: null, token, name: null, refused: problem.message };
	}
};

export const actions: Actions = {
	ask: async (event) => {
		publicRoute(event);
		const form = await superValidate<Newcomer, FormMessage>(event.request, zod(schema));
		if (!form.valid) return fail(400, { form });
		try {
			await askByLink(event.params.token, form.data.email, event.getClientAddress());
		} catch (problem) {
			return showRefusal(form, problem);
		}
		return message(form, {
			kind: 'done',
			text: `A link to take your place is on its way to ${form.data.email}.`
		});
	},
	join: async (event) => {
		const actor = requireActor(event);
		try {
			await joinByLink(actor, event.params.token);
		} catch (problem) {
			if (!(problem instanceof Refusal)) throw problem;
			return fail(problem.status, { refused: problem.message });
		}
		redirect(303, '/today');
	}
};
