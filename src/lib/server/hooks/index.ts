import { building } from '$app/environment';
import type { Handle, HandleServerError, ServerInit } from '@sveltejs/kit';
import { sequence } from '@sveltejs/kit/hooks';
import { randomUUID } from 'node:crypto';
import { authHandle } from '../auth/auth-js';
import { log } from '../log';
import { isDatabaseAway } from '../database/away';
import { apiProblems } from './api';
import { sayWhenAway } from './away';
import { securityHeaders } from './headers';
import { openServer } from './lifecycle';
import { oneAddress, refuseCrossSite } from './origin';
import { loadActor, noAuthEndpoints } from './session';

const serving = sequence(
	securityHeaders,
	oneAddress,
	refuseCrossSite,
	sayWhenAway,
	apiProblems,
	noAuthEndpoints,
	authHandle,
	loadActor
);

export const handle: Handle = (input) => {
	if (!building) return serving(input);
	// Pages made during the build have no settings and no visitor.
	input.event.locals.actor = null;
	return input.resolve(input.event);
};

export const init: ServerInit = async () => {
	if (!building) await openServer();
};

/** The person gets a sentence and a reference; the log gets the cause under the same reference. */
export const handleError: HandleServerError = ({ error, event, status, message }) => {
	if (status < 500) return { message };
	event.locals.databaseAway ||= isDatabaseAway(error);
	const reference = randomUUID().slice(0, 8);
	const cause = error instanceof Error ? error : new Error('unknown');
	// The stack's own lines only: the first line of a database error may carry values.
	const stack = cause.stack?.split('\n').filter((line) => line.startsWith('    at '));
	log().error({ reference, route: event.route.id, reason: cause.message, stack }, 'request failed');
	return { message: 'Something went wrong on our side. Nothing you stored is lost.', reference };
};
