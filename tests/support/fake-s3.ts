import { createHash, createHmac } from 'node:crypto';
import { createServer, type IncomingMessage, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';

/**
 * A bucket on this machine that speaks the part of the S3 REST API we use, as Amazon's "API
 * Reference" describes it (PutObject, GetObject, HeadObject, DeleteObject, ListObjectsV2, "Error
 * responses"): path-style addresses, XML errors, ETags. It computes the signature of every request
 * itself, by "Signature Version 4: calculating a signature", and refuses a wrong one.
 */
export interface FakeS3 {
	/** For FILES_URL: `s3://evidence/kept?endpoint=...&pathStyle=1`. */
	readonly url: string;
	readonly objects: Map<string, { readonly bytes: Buffer; readonly type: string }>;
	/** `PUT /evidence/kept/...` of each request, in order. */
	readonly requests: readonly string[];
	/** Headers of the latest request. */
	readonly lastHeaders: () => Readonly<Record<string, unknown>>;
	/** What the next requests meet instead of an answer. */
	fail(...faults: Fault[]): void;
	close(): Promise<void>;
}

/** `stall`: never answers; `stall-body`: begins an answer and never ends it. */
export type Fault = 'internal-error' | 'access-denied' | 'slow-down' | 'stall' | 'stall-body';

export const FAKE_CREDENTIALS = { AWS_ACCESS_KEY_ID: 'AKIDFAKE', AWS_SECRET_ACCESS_KEY: 'fake' };
const BUCKET = 'evidence';
const REGION = 'eu-central-1';
/** Small, so that a list of a few keys comes in pages. */
const PAGE = 2;

const FAULTS = {
	'internal-error': [500, 'InternalError'],
	'access-denied': [403, 'AccessDenied'],
	'slow-down': [503, 'SlowDown']
} as const;

const sha256 = (data: string | Buffer) => createHash('sha256').update(data).digest('hex');
const hmac = (key: string | Buffer, data: string) =>
	createHmac('sha256', key).update(data).digest();
/** As URI encoding is defined there: everything but A-Z a-z 0-9 - . _ ~. */
const uri = (text: string) =>
	encodeURIComponent(text).replace(
		/[!'()*]/g,
		(c) => `%${c.charCodeAt(0).toString(16).toUpperCase()}`
	);

/** Whether the request was signed with our secret; also that its body is the one that was signed. */
function isSigned(request: IncomingMessage, url: URL, body: Buffer): boolean {
	const { authorization = '' } = request.headers;
	const parts =
		/^AWS4-HMAC-SHA256 Credential=AKIDFAKE\/(\d{8})\/([\w-]+)\/s3\/aws4_request, ?SignedHeaders=([\w;-]+), ?Signature=([0-9a-f]{64})$/.exec(
			authorization
		);
	if (!parts) return false;
	const [, day = '', region = '', signed = '', signature = ''] = parts;
	const time = String(request.headers['x-amz-date']);
	const payload = String(request.headers['x-amz-content-sha256']);
	if (region !== REGION || !time.startsWith(day)) return false;
	if (payload !== 'UNSIGNED-PAYLOAD' && payload !== sha256(body)) return false;
	const names = signed.split(';');
	if (!names.includes('host') || !names.includes('x-amz-date')) return false;
	const canonical = [
		request.method,
		url.pathname
			.split('/')
			.map((part) => uri(decodeURIComponent(part)))
			.join('/'),
		[...url.searchParams]
			.map(([key, value]) => `${uri(key)}=${uri(value)}`)
			.sort()
			.join('&'),
		...names.map((name) => `${name}:${String(request.headers[name]).trim().replace(/ +/g, ' ')}`),
		'',
		signed,
		payload
	].join('\n');
	const scope = `${day}/${region}/s3/aws4_request`;
	const secret = `AWS4${FAKE_CREDENTIALS.AWS_SECRET_ACCESS_KEY}`;
	const key = [region, 's3', 'aws4_request'].reduce(hmac, hmac(secret, day));
	const expected = hmac(key, ['AWS4-HMAC-SHA256', time, scope, sha256(canonical)].join('\n'));
	return expected.toString('hex') === signature;
}

function sendXml(response: ServerResponse, status: number, xml: string): void {
	response.writeHead(status, { 'Content-Type': 'application/xml' });
	response.end(`<?xml version="1.0" encoding="UTF-8"?>\n${xml}`);
}

const sendError = (response: ServerResponse, status: number, code: string) =>
	sendXml(
		response,
		status,
		`<Error><Code>${code}</Code><Message>${code}</Message><RequestId>1</RequestId></Error>`
	);

export async function startFakeS3(): Promise<FakeS3> {
	const objects: FakeS3['objects'] = new Map();
	const requests: string[] = [];
	const faults: Fault[] = [];
	let headers: IncomingMessage['headers'] = {};

	function list(url: URL, response: ServerResponse): void {
		const prefix = url.searchParams.get('prefix') ?? '';
		const after = url.searchParams.get('continuation-token') ?? '';
		const keys = [...objects.keys()].filter((key) => key.startsWith(prefix) && key > after).sort();
		const page = keys.slice(0, PAGE);
		const more = keys.length > page.length;
		const contents = page.map((key) => `<Contents><Key>${key}</Key></Contents>`).join('');
		const next = more ? `<NextContinuationToken>${page.at(-1)}</NextContinuationToken>` : '';
		sendXml(
			response,
			200,
			`<ListBucketResult xmlns="http://s3.amazonaws.com/doc/2006-03-01/"><Name>${BUCKET}</Name><KeyCount>${page.length}</KeyCount><IsTruncated>${more}</IsTruncated>${next}${contents}</ListBucketResult>`
		);
	}

	function answer(request: IncomingMessage, url: URL, body: Buffer, response: ServerResponse) {
		const [, bucket, ...rest] = decodeURIComponent(url.pathname).split('/');
		const key = rest.join('/');
		if (bucket !== BUCKET) return sendError(response, 404, 'NoSuchBucket');
		if (request.method === 'GET' && key === '') return list(url, response);
		if (request.method === 'PUT') {
			objects.set(key, { bytes: body, type: request.headers['content-type'] ?? '' });
			const etag = `"${createHash('md5').update(body).digest('hex')}"`;
			return response.writeHead(200, { ETag: etag }).end();
		}
		if (request.method === 'DELETE') {
			objects.delete(key);
			return response.writeHead(204).end();
		}
		const object = objects.get(key);
		if (!object) return sendError(response, 404, 'NoSuchKey');
		response.writeHead(200, {
			'Content-Type': object.type,
			'Content-Length': object.bytes.length,
			ETag: `"${createHash('md5').update(object.bytes).digest('hex')}"`
		});
		return response.end(request.method === 'HEAD' ? undefined : object.bytes);
	}

	const server = createServer((request, response) => {
		const chunks: Buffer[] = [];
		request.on('data', (chunk: Buffer) => chunks.push(chunk));
		request.on('end', () => {
			const url = new URL(request.url ?? '/', 'http://127.0.0.1');
			requests.push(`${request.method} ${url.pathname}`);
			headers = request.headers;
			const body = Buffer.concat(chunks);
			const fault = faults.shift();
			if (fault === 'stall') return;
			if (fault === 'stall-body') {
				response.writeHead(200, { 'Content-Length': 1_000 }).write('begun');
				return;
			}
			if (fault) {
				const [status, code] = FAULTS[fault];
				return sendError(response, status, code);
			}
			if (!isSigned(request, url, body)) return sendError(response, 403, 'SignatureDoesNotMatch');
			answer(request, url, body, response);
		});
	});
	await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
	const { port } = server.address() as AddressInfo;
	const endpoint = encodeURIComponent(`http://127.0.0.1:${port}`);
	return {
		url: `s3://${BUCKET}/kept?region=${REGION}&endpoint=${endpoint}&pathStyle=1`,
		objects,
		requests,
		lastHeaders: () => headers,
		fail: (...next) => void faults.push(...next),
		async close() {
			server.closeAllConnections();
			await new Promise((resolve) => server.close(resolve));
		}
	};
}
