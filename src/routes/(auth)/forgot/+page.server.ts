import { fail } from '@sveltejs/kit';
import { message, superValidate } from 'sveltekit-superforms';
import { zod } from 'superforms-zod';
import { z } from 'zod';
import { publicRoute } from '$lib/server/auth';
import { emailField, showRefusal, type FormMessage } from '$lib/server/forms';
import { requestReset } from '$lib/server/services/accounts';
import type { Actions, PageServerLoad } from './$types';

const schema = z.object({ email: emailField });

export const load: PageServerLoad = async (event) => {
	publicRoute(event);
	return { form: await superValidate<z.infer<typeof schema>, FormMessage>(zod(schema)) };
};

export const actions: Actions = {
	default: async (event) => {
		publicRoute(event);
		const form = await superValidate<z.infer<typeof schema>, FormMessage>(
			event.request,
			zod(schema)
		);
		if (!form.valid) return fail(400, { form });
		try {
			await requestReset(form.data.email, event.getClientAddress());
		} catch (problem) {
			return showRefusal(form, problem);
		}
		return message(form, {
			kind: 'done',
			text: `If ${form.data.email} has an account, a link is on its way there. It lasts an hour.`
		});
	}
};
