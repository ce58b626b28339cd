import { fail, type RequestEvent } from '@sveltejs/kit';
import { message, superValidate } from 'sveltekit-superforms';
import { zod } from 'superforms-zod';
import { z } from 'zod';
import { requireRole, ROLES, type Actor } from '$lib/server/auth';
import {
	emailField,
	nameField,
	pageNumber,
	showRefusal,
	type FormMessage
} from '$lib/server/forms';
import { Refusal } from '$lib/server/refusal';
import {
	changeRole,
	createUser,
	deactivateUser,
	listUsers,
	reactivateUser,
	sendWelcomeAgain
} from '$lib/server/services/users';
import type { Actions, PageServerLoad } from './$types';

const newcomer = z.object({
	name: nameField,
	email: emailField,
	role: z.enum(ROLES).default('student')
});
type Newcomer = z.infer<typeof newcomer>;
const roleChange = z.object({ id: z.string(), role: z.enum(ROLES) });

export const load: PageServerLoad = async (event) => {
	const actor = requireRole(event, 'admin');
	const search = (event.url.searchParams.get('search') ?? '').slice(0, 200);
	const page = pageNumber(event.url);
	const form = await superValidate<Newcomer, FormMessage>(zod(newcomer));
	return { ...(await listUsers(actor, { search, page })), search, page, self: actor.id, form };
};

/** Does one thing to the user whose id the form carries; a refusal comes back as its sentence. */
async function toUser(
	event: RequestEvent,
	actor: Actor,
	deed: (actor: Actor, id: string) => Promise<void>,
	done: string
) {
	const id = String((await event.request.formData()).get('id') ?? '');
	try {
		await deed(actor, id);
		return { done, id };
	} catch (problem) {
		if (!(problem instanceof Refusal)) throw problem;
		return fail(problem.status, { refused: problem.message, id });
	}
}

export const actions: Actions = {
	create: async (event) => {
		const actor = requireRole(event, 'admin');
		const form = await superValidate<Newcomer, FormMessage>(event.request, zod(newcomer));
		if (!form.valid) return fail(400, { form });
		try {
			const user = await createUser(actor, form.data);
			const text = `The account is made. A link to choose a password is on its way to ${user.email}.`;
			return message(form, { kind: 'done', text });
		} catch (problem) {
			return showRefusal(form, problem);
		}
	},
	deactivate: async (event) => {
		const actor = requireRole(event, 'admin');
		return toUser(event, actor, deactivateUser, 'The account is closed; its sessions have ended.');
	},
	reactivate: async (event) => {
		const actor = requireRole(event, 'admin');
		return toUser(event, actor, reactivateUser, 'The account is open again.');
	},
	welcome: async (event) => {
		const actor = requireRole(event, 'admin');
		return toUser(
			event,
			actor,
			sendWelcomeAgain,
			'A new link is on its way; older ones stop working.'
		);
	},
	role: async (event) => {
		const actor = requireRole(event, 'admin');
		const given = Object.fromEntries(await event.request.formData());
		const parsed = roleChange.safeParse(given);
		if (!parsed.success)
			return fail(400, { refused: 'Choose a role.', id: String(given.id ?? '') });
		const { id, role } = parsed.data;
		try {
			await changeRole(actor, id, role);
			return { done: `The role is ${role} now.`, id };
		} catch (problem) {
			if (!(problem instanceof Refusal)) throw problem;
			return fail(problem.status, { refused: problem.message, id });
		}
	}
};
