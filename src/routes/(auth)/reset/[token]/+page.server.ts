import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod } from 'superforms-zod';
import { z } from 'zod';
import { homeOf, publicRoute } from '$lib/server/auth';
import { beginSession } from '$lib/server/auth/auth-js';
import { chosenPassword, showRefusal, withoutPasswords, type FormMessage } from '$lib/server/forms';
import { Refusal } from '$lib/server/refusal';
import { readReset, setPasswordByLink } from '$lib/server/services/accounts';
import type { Actions, PageServerLoad } from './$types';

const schema = z.object({ password: chosenPassword });

export const load: PageServerLoad = async (event) => {
	publicRoute(event);
	try {
		const reset = await readReset(event.params.token, event.getClientAddress());
		const form = await superValidate<z.infer<typeof schema>, FormMessage>(zod(schema));
		return { form, reset, refused: null };
	} catch (problem) {
		if (!(problem instanceof Refusal)) throw problem;
		return { form: null, reset: null, refused: problem.message };
	}
};

export const actions: Actions = {
	default: async (event) => {
		publicRoute(event);
		const form = await superValidate<z.infer<typeof schema>, FormMessage>(
			event.request,
			zod(schema)
		);
		const { password } = form.data;
		withoutPasswords(form);
		if (!form.valid) return fail(400, { form });
		let email: string;
		try {
			email = await setPasswordByLink(event.params.token, password, event.getClientAddress());
		} catch (problem) {
			return showRefusal(form, problem);
		}
		const outcome = await beginSession(event, email, password);
		redirect(303, outcome.refused === undefined ? homeOf(outcome.actor.role) : '/sign-in');
	}
};
