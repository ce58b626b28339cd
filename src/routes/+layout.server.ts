import { publicRoute } from '$lib/server/auth';
import type { LayoutServerLoad } from './$types';

/** Who is signed in, for the frame of every page; null for a stranger. */
export const load: LayoutServerLoad = (event) => {
	const actor = publicRoute(event);
	return { actor: actor && { id: actor.id, name: actor.name, role: actor.role } };
};
