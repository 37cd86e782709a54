import { error, type RequestEvent } from '@sveltejs/kit';

/** Superforms' field for whole objects. No form of ours sends it, and its parser may stumble. */
const WHOLE_OBJECT = '__superform_json';

/**
 * Makes a body that is no form, or half of one, its sender's error, whoever reads it: the
 * platform's own is a TypeError, which would be answered and logged as a defect of ours.
 */
export function guardForms({ request }: Pick<RequestEvent, 'request'>): void {
	const read = request.formData.bind(request);
	const formData = async (): Promise<FormData> => {
		// Reading a form twice is our defect, and stays one.
		if (request.bodyUsed) return read();
		let data: FormData;
		try {
			data = await read();
		} catch (thrown) {
			if (!(thrown instanceof TypeError)) throw thrown;
			error(400, 'The form did not arrive whole. Go back and send it again.');
		}
		data.delete(WHOLE_OBJECT);
		return data;
	};
	Object.defineProperty(request, 'formData', { value: formData });
}
