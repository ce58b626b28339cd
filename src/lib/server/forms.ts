import {
	message,
	setError,
	type FormPathLeavesWithErrors,
	type SuperValidated
} from 'sveltekit-superforms';
import { z } from 'zod';
import { LONGEST_PASSWORD_BYTES, SHORTEST_PASSWORD } from './auth/password-rules';
import { Refusal } from './refusal';

/** What forms of several pages ask for, with the sentences that name a fault. */
export const emailField = z
	.string()
	.trim()
	.min(1, 'Type an e-mail address.')
	.max(254, 'This address is too long.')
	.regex(
		z.regexes.email,
		'This is not a whole e-mail address; it should look like name@example.org.'
	);

/** Signs that turn the direction of writing, so that a name could pretend to be another, or show nothing. */
const HIDDEN = /[\u202a-\u202e\u2066-\u2069\u200b\u2060\ufeff]/g;
/** Something that can be seen: not only spaces, joiners, accents and letters without a shape. */
const VISIBLE = /[^\p{Z}\p{C}\p{M}\u115f\u1160\u2800\u3164\uffa0]/u;

/** A name of a person or a class: one line of text that can be seen. */
export const nameField = z
	.string()
	.overwrite((text) => text.replace(/[\p{Cc}\u2028\u2029]+/gu, ' ').replace(HIDDEN, ''))
	.trim()
	.min(1, 'Type a name.')
	.max(120, 'Use at most 120 characters.')
	.regex(VISIBLE, 'Type a name that can be read.');

/** A password somebody signs in with: any text. */
export const givenPassword = z.string().min(1, 'Type your password.').max(1000);

/** A password somebody chooses; the rules themselves are the account service's. */
export const chosenPassword = z
	.string()
	.min(SHORTEST_PASSWORD, `Use at least ${SHORTEST_PASSWORD} characters.`)
	.max(LONGEST_PASSWORD_BYTES, `Use at most ${LONGEST_PASSWORD_BYTES} characters.`);

/** A calendar day, or nothing. */
export const dayField = z
	.union([z.literal(''), z.iso.date('Choose a day.')])
	.optional()
	.default('');

/** The page of a list that an address asks for, counted from 1. */
export function pageNumber(url: URL): number {
	const asked = Number(url.searchParams.get('page') ?? 1);
	return Number.isInteger(asked) && asked >= 1 && asked <= 100_000 ? asked : 1;
}

/** One line above a form: what was done, or why not. */
export interface FormMessage {
	kind: 'done' | 'refused';
	text: string;
}

/** Passwords never travel back to the page. */
export function withoutPasswords<T extends Record<string, unknown>>(
	form: SuperValidated<T, FormMessage>
): void {
	for (const name of ['password', 'current']) {
		if (name in form.data) Object.assign(form.data, { [name]: '' });
	}
}

/**
 * Shows a service's refusal where the person is looking: at its field, or above the form.
 * @throws whatever is not a Refusal.
 */
export function showRefusal<T extends Record<string, unknown>>(
	form: SuperValidated<T, FormMessage>,
	problem: unknown
) {
	if (!(problem instanceof Refusal)) throw problem;
	withoutPasswords(form);
	const status = problem.status as 400;
	if (problem.field !== undefined && problem.field in form.data) {
		const field = problem.field as FormPathLeavesWithErrors<T>;
		return setError(form, field, problem.message, { status });
	}
	return message(form, { kind: 'refused', text: problem.message }, { status });
}
