import { json } from '@sveltejs/kit';
import { publicRoute } from '$lib/server/auth';
import { problem } from '$lib/server/problem';
import { isHealthy } from '$lib/server/services/health';
import type { RequestHandler } from './$types';

export const GET: RequestHandler = async (event) => {
	publicRoute(event);
	if (!(await isHealthy())) return problem(503, 'The database does not answer');
	return json({ status: 'ok' }, { headers: { 'cache-control': 'no-store' } });
};
