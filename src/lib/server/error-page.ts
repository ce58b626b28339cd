import { error } from '@sveltejs/kit';
import { Refusal } from './refusal';

/**
 * For loads: a service's refusal becomes the error page with its status.
 * @throws whatever else went wrong.
 */
export async function orErrorPage<T>(work: Promise<T>): Promise<T> {
	try {
		return await work;
	} catch (cause) {
		if (cause instanceof Refusal) error(cause.status, cause.message);
		throw cause;
	}
}
