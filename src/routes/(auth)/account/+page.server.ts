import { fail, redirect } from '@sveltejs/kit';
import { message, superValidate } from 'sveltekit-superforms';
import { zod } from 'superforms-zod';
import { z } from 'zod';
import { requireActor } from '$lib/server/auth';
import { beginSession, endSession } from '$lib/server/auth/auth-js';
import {
	chosenPassword,
	givenPassword,
	nameField,
	showRefusal,
	withoutPasswords,
	type FormMessage
} from '$lib/server/forms';
import { changeName, changePassword, signOutEverywhere } from '$lib/server/services/accounts';
import type { Actions, PageServerLoad } from './$types';

const nameSchema = z.object({ name: nameField });
const passwordSchema = z.object({ current: givenPassword, password: chosenPassword });
type NameForm = z.infer<typeof nameSchema>;
type PasswordForm = z.infer<typeof passwordSchema>;

export const load: PageServerLoad = async (event) => {
	const actor = requireActor(event);
	return {
		email: actor.email,
		nameForm: await superValidate<NameForm, FormMessage>({ name: actor.name }, zod(nameSchema)),
		passwordForm: await superValidate<PasswordForm, FormMessage>(zod(passwordSchema))
	};
};

export const actions: Actions = {
	name: async (event) => {
		const actor = requireActor(event);
		const form = await superValidate<NameForm, FormMessage>(event.request, zod(nameSchema));
		if (!form.valid) return fail(400, { form });
		await changeName(actor, form.data.name);
		return message(form, { kind: 'done', text: 'Your name is changed.' });
	},
	password: async (event) => {
		const actor = requireActor(event);
		const form = await superValidate<PasswordForm, FormMessage>(event.request, zod(passwordSchema));
		const { current, password } = form.data;
		withoutPasswords(form);
		if (!form.valid) return fail(400, { form });
		try {
			await changePassword(actor, current, password);
		} catch (problem) {
			return showRefusal(form, problem);
		}
		// Every session has ended, this one too; whoever knows both passwords gets a new one.
		const outcome = await beginSession(event, actor.email, password);
		if (outcome.refused !== undefined) redirect(303, '/sign-in');
		return message(form, {
			kind: 'done',
			text: 'Your password is changed. Every other browser has been signed out.'
		});
	},
	everywhere: async (event) => {
		const actor = requireActor(event);
		await signOutEverywhere(actor);
		await endSession(event);
		redirect(303, '/sign-in');
	}
};
