/**
 * Why a service will not do what it was asked, in a sentence for the person. Routes show the message
 * where the person is looking; it never carries technical detail.
 */
export class Refusal extends Error {
	constructor(
		/** A stable word for tests and for choosing an HTTP status. */
		readonly kind: 'not-found' | 'forbidden' | 'conflict' | 'invalid' | 'expired' | 'too-many',
		message: string,
		/** The field the sentence belongs to, if there is one. */
		readonly field?: string
	) {
		super(message);
		this.name = 'Refusal';
	}

	get status(): number {
		return {
			'not-found': 404,
			forbidden: 403,
			conflict: 409,
			invalid: 400,
			expired: 410,
			'too-many': 429
		}[this.kind];
	}
}
