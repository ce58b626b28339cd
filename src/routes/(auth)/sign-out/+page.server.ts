import { redirect } from '@sveltejs/kit';
import { publicRoute } from '$lib/server/auth';
import { endSession } from '$lib/server/auth/auth-js';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = (event) => {
	const actor = publicRoute(event);
	if (!actor) redirect(303, '/');
};

export const actions: Actions = {
	default: async (event) => {
		publicRoute(event);
		await endSession(event);
		redirect(303, '/sign-in');
	}
};
