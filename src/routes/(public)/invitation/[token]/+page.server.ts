import { fail, redirect } from '@sveltejs/kit';
import { superValidate } from 'sveltekit-superforms';
import { zod } from 'superforms-zod';
import { z } from 'zod';
import { homeOf, publicRoute, requireActor } from '$lib/server/auth';
import { beginSession } from '$lib/server/auth/auth-js';
import {
	chosenPassword,
	nameField,
	showRefusal,
	withoutPasswords,
	type FormMessage
} from '$lib/server/forms';
import { Refusal } from '$lib/server/refusal';
import { acceptAsMember, acceptAsNewcomer, readInvitation } from '$lib/server/services/invitations';
import type { Actions, PageServerLoad } from './$types';

const schema = z.object({ name: nameField, password: chosenPassword });
type Newcomer = z.infer<typeof schema>;

export const load: PageServerLoad = async (event) => {
	const actor = publicRoute(event);
	const token = event.params.token;
	try {
		const invitation = await readInvitation(token, actor, event.getClientAddress());
		const form = await superValidate<Newcomer, FormMessage>(zod(schema));
		return { invitation, form, token, refused: null };
	} catch (problem) {
		if (!(problem instanceof Refusal)) throw problem;
		return { invitation: null, form: null, token, refused: problem.message };
	}
};

export const actions: Actions = {
	newcomer: async (event) => {
		publicRoute(event);
		const form = await superValidate<Newcomer, FormMessage>(event.request, zod(schema));
		const { name, password } = form.data;
		withoutPasswords(form);
		if (!form.valid) return fail(400, { form });
		let email: string;
		try {
			const facts = { name, password };
			email = await acceptAsNewcomer(event.params.token, facts, event.getClientAddress());
		} catch (problem) {
			return showRefusal(form, problem);
		}
		const outcome = await beginSession(event, email, password);
		redirect(303, outcome.refused === undefined ? homeOf(outcome.actor.role) : '/sign-in');
	},
	member: async (event) => {
		const actor = requireActor(event);
		try {
			await acceptAsMember(event.params.token, actor);
		} catch (problem) {
			if (!(problem instanceof Refusal)) throw problem;
			return fail(problem.status, { refused: problem.message });
		}
		redirect(303, '/today');
	}
};
