import { requireRole } from '$lib/server/auth';
import { pageNumber } from '$lib/server/forms';
import { listAudit } from '$lib/server/services/audit';
import type { PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
	const actor = requireRole(event, 'admin');
	const page = pageNumber(event.url);
	return { ...(await listAudit(actor, page)), page };
};
