import { requireRole } from '$lib/server/auth';
import { listOutbox, listReceived } from '$lib/server/services/mail';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const actor = requireRole(event, 'admin');
	const [outbox, received] = await Promise.all([listOutbox(actor), listReceived(actor)]);
	// Of a received mail the page shows the text and its links, never the HTML a stranger could write.
	return { outbox, received: received?.map(({ html: _html, ...mail }) => mail) ?? null };
};
