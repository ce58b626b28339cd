import type { Actor } from '$lib/server/auth/actor';

declare global {
	namespace App {
		interface Error {
			message: string;
			/** Stands in the log beside the cause, so that a report can be matched to it. */
			reference?: string;
		}
		interface Locals {
			/** The signed-in person, read from the database for this request; null for a stranger. */
			actor: Actor | null;
			/** Something in this request failed because the database does not answer. */
			databaseAway?: boolean;
		}
	}
}

export {};
