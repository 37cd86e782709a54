import type { TestServer } from './server';

export type Fields = Readonly<Record<string, string>>;

/** A browser without a screen: keeps cookies, says where its forms come from, follows nothing. */
export class Visitor {
	readonly cookies = new Map<string, string>();

	constructor(readonly server: Pick<TestServer, 'origin' | 'address'>) {}

	async request(path: string, init: RequestInit = {}): Promise<Response> {
		const headers = new Headers(init.headers);
		const cookie = [...this.cookies].map(([name, value]) => `${name}=${value}`).join('; ');
		if (cookie) headers.set('Cookie', cookie);
		// Without it SvelteKit answers a form like its own script asks.
		if (!headers.has('Accept')) headers.set('Accept', 'text/html');
		if (init.method && init.method !== 'GET' && !headers.has('Origin')) {
			headers.set('Origin', this.server.origin);
		}
		const response = await fetch(new URL(path, this.server.address), {
			redirect: 'manual',
			...init,
			headers
		});
		for (const line of response.headers.getSetCookie()) this.keep(line);
		return response;
	}

	get(path: string, headers: Fields = {}): Promise<Response> {
		return this.request(path, { headers });
	}

	/** Sends a form as a browser without JavaScript does. */
	submit(path: string, fields: Fields = {}, headers: Fields = {}): Promise<Response> {
		return this.request(path, { method: 'POST', body: new URLSearchParams(fields), headers });
	}

	sendJson(method: string, path: string, body?: unknown, headers: Fields = {}): Promise<Response> {
		return this.request(path, {
			method,
			headers: { 'Content-Type': 'application/json', ...headers },
			...(body !== undefined && { body: JSON.stringify(body) })
		});
	}

	private keep(line: string): void {
		const [pair = '', ...attributes] = line.split(';');
		const at = pair.indexOf('=');
		const name = pair.slice(0, at).trim();
		const gone = attributes.some((attribute) => /^\s*max-age=0\s*$/i.test(attribute));
		if (gone) this.cookies.delete(name);
		else this.cookies.set(name, pair.slice(at + 1));
	}
}
