import { describe, expect, it } from 'vitest';
import { guardForms } from './guard-forms';

function sent(body: string | ReadableStream, type: string): Request {
	const headers = { 'Content-Type': type };
	const more = { duplex: 'half' };
	const request = new Request('http://reading.example/', {
		method: 'POST',
		body,
		headers,
		...more
	});
	guardForms({ request });
	return request;
}

const FORM = 'application/x-www-form-urlencoded';

describe('a guarded request', () => {
	it('gives its form as it was sent, without the field for whole objects', async () => {
		const data = await sent('name=Wren&name=Aldous&__superform_json=[[0]]', FORM).formData();
		expect([...data]).toEqual([
			['name', 'Wren'],
			['name', 'Aldous']
		]);
	});

	it.each([
		['text', 'name=Wren', 'text/plain'],
		['no boundary', 'x', 'multipart/form-data'],
		[
			'half of it',
			'--b\r\nContent-Disposition: form-data; name="a"\r\n\r\nx',
			'multipart/form-data; boundary=b'
		]
	])('answers %s as its sender’s error', async (_, body, type) => {
		await expect(sent(body, type).formData()).rejects.toMatchObject({
			status: 400,
			body: { message: 'The form did not arrive whole. Go back and send it again.' }
		});
	});

	it('passes on what the server itself says of the body, and a second reading', async () => {
		const tooLarge = new RangeError('more than the server takes');
		const stream = new ReadableStream({ pull: (controller) => controller.error(tooLarge) });
		await expect(sent(stream, FORM).formData()).rejects.toBe(tooLarge);
		const twice = sent('a=1', FORM);
		await twice.formData();
		await expect(twice.formData()).rejects.toThrow(TypeError);
	});
});
