import { error } from '@sveltejs/kit';
import { ServiceError } from '../errors';

/** For loads: a service's error becomes the error page of its status. */
export async function answering<T>(work: () => Promise<T>): Promise<T> {
	try {
		return await work();
	} catch (thrown) {
		if (thrown instanceof ServiceError) error(thrown.status, thrown.message);
		throw thrown;
	}
}
