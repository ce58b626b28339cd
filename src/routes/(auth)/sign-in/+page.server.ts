import { fail, redirect } from '@sveltejs/kit';
import { message, superValidate } from 'sveltekit-superforms';
import { zod } from 'superforms-zod';
import { z } from 'zod';
import { homeOf, publicRoute } from '$lib/server/auth';
import { beginSession } from '$lib/server/auth/auth-js';
import { safePath } from '$lib/server/auth/safe-path';
import { emailField, givenPassword, withoutPasswords, type FormMessage } from '$lib/server/forms';
import type { Actions, PageServerLoad } from './$types';

const schema = z.object({
	email: emailField,
	password: givenPassword,
	redirectTo: z.string().max(500).default('')
});

export const load: PageServerLoad = async (event) => {
	const actor = publicRoute(event);
	const redirectTo = safePath(event.url.searchParams.get('redirectTo'));
	if (actor) redirect(303, redirectTo ?? homeOf(actor.role));
	const email = event.url.searchParams.get('email') ?? '';
	const form = await superValidate<z.infer<typeof schema>, FormMessage>(
		{ email, redirectTo: redirectTo ?? '' },
		zod(schema),
		{ errors: false }
	);
	return { form, sentHere: redirectTo !== null };
};

export const actions: Actions = {
	default: async (event) => {
		publicRoute(event);
		const form = await superValidate<z.infer<typeof schema>, FormMessage>(
			event.request,
			zod(schema)
		);
		const { email, password, redirectTo } = form.data;
		withoutPasswords(form);
		if (!form.valid) return fail(400, { form });
		const outcome = await beginSession(event, email, password);
		if (outcome.refused !== undefined) {
			const { refused, status } = outcome;
			return message(form, { kind: 'refused', text: refused }, { status });
		}
		redirect(303, safePath(redirectTo) ?? homeOf(outcome.actor.role));
	}
};
