import { fail, redirect } from '@sveltejs/kit';
import { message, superValidate } from 'sveltekit-superforms';
import { zod } from 'superforms-zod';
import { z } from 'zod';
import { requireRole } from '$lib/server/auth';
import { orErrorPage } from '$lib/server/error-page';
import { dayField, emailField, nameField, showRefusal, type FormMessage } from '$lib/server/forms';
import { Refusal } from '$lib/server/refusal';
import { classOverview } from '$lib/server/services/class-overview';
import { archiveClass, changeClass, joinLink, revokeJoinLink } from '$lib/server/services/classes';
import { dayWords } from '$lib/server/services/day-words';
import { inviteByEmail, listInvitations, revokeInvitation } from '$lib/server/services/invitations';
import { flagOf, leadWords, whenWords } from './class-words';
import type { Actions, PageServerLoad } from './$types';

const inviteSchema = z.object({ email: emailField });
const factsSchema = z.object({ name: nameField, startsOn: dayField, endsOn: dayField });
type InviteForm = z.infer<typeof inviteSchema>;
type FactsForm = z.infer<typeof factsSchema>;

export const load: PageServerLoad = async (event) => {
	const actor = requireRole(event, 'instructor');
	const now = new Date();
	const id = event.params.id;
	const [overview, invitations, link] = await orErrorPage(
		Promise.all([classOverview(actor, id, now), listInvitations(actor, id), joinLink(actor, id)])
	);
	const { name, startsOn, endsOn } = overview.class;
	const when = whenWords(startsOn, endsOn, now.toISOString().slice(0, 10));
	return {
		class: overview.class,
		lead: leadWords(overview.students, when),
		students: overview.students.map((student) => ({
			...student,
			flag: flagOf(student),
			lastSeen: student.lastPractice && dayWords(student.lastPractice, now)
		})),
		invitations: invitations.map((line) => ({
			id: line.id,
			email: line.email,
			byJoinLink: line.byJoinLink,
			expired: line.expired,
			sent: dayWords(line.createdAt.toISOString(), now)
		})),
		link,
		inviteForm: await superValidate<InviteForm, FormMessage>(zod(inviteSchema), { id: 'invite' }),
		factsForm: await superValidate<FactsForm, FormMessage>(
			{ name, startsOn: startsOn ?? '', endsOn: endsOn ?? '' },
			zod(factsSchema),
			{ id: 'facts' }
		)
	};
};

/** Runs a deed without fields of its own; a refusal is shown above its place. */
async function deed(work: Promise<unknown>, done: string) {
	try {
		await work;
		return { note: { kind: 'done' as const, text: done } };
	} catch (problem) {
		if (!(problem instanceof Refusal)) throw problem;
		return fail(problem.status, { note: { kind: 'refused' as const, text: problem.message } });
	}
}

export const actions: Actions = {
	invite: async (event) => {
		const actor = requireRole(event, 'instructor');
		const form = await superValidate<InviteForm, FormMessage>(event.request, zod(inviteSchema), {
			id: 'invite'
		});
		if (!form.valid) return fail(400, { form });
		try {
			await inviteByEmail(actor, event.params.id, form.data.email);
		} catch (problem) {
			return showRefusal(form, problem);
		}
		const text = `An invitation is on its way to ${form.data.email}.`;
		form.data.email = '';
		return message(form, { kind: 'done', text });
	},
	withdraw: async (event) => {
		const actor = requireRole(event, 'instructor');
		const data = await event.request.formData();
		const invitationId = String(data.get('invitation') ?? '');
		return deed(
			revokeInvitation(actor, event.params.id, invitationId),
			'The invitation is withdrawn; its link no longer works.'
		);
	},
	newLink: async (event) => {
		const actor = requireRole(event, 'instructor');
		return deed(
			revokeJoinLink(actor, event.params.id),
			'The old join link no longer works. Below is the new one.'
		);
	},
	facts: async (event) => {
		const actor = requireRole(event, 'instructor');
		const form = await superValidate<FactsForm, FormMessage>(event.request, zod(factsSchema), {
			id: 'facts'
		});
		if (!form.valid) return fail(400, { form });
		try {
			await changeClass(actor, event.params.id, form.data);
		} catch (problem) {
			return showRefusal(form, problem);
		}
		return message(form, { kind: 'done', text: 'Changed.' });
	},
	putAway: async (event) => {
		const actor = requireRole(event, 'instructor');
		const outcome = await deed(archiveClass(actor, event.params.id, true), 'Put away.');
		if (!('note' in outcome)) return outcome;
		redirect(303, '/classes');
	}
};
