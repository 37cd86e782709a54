/** Where files are kept, as FILES_URL says it. */
export type StorePlace =
	| { readonly kind: 'disk'; readonly folder: string }
	| {
			readonly kind: 's3';
			readonly bucket: string;
			/** Empty, or ending in a slash. */
			readonly prefix: string;
			readonly region: string;
			readonly endpoint: string | null;
			/** The bucket in the path instead of in the host's name. */
			readonly pathStyle: boolean;
	  };

/** Services other than Amazon's mostly take any region; this is the one they assume. */
const ANY_REGION = 'us-east-1';

const KNOWN = ['region', 'endpoint', 'pathStyle'];
const EXAMPLE = 's3://bucket/prefix?region=eu-central-1';

/**
 * Reads `file:data/files` or `s3://bucket/prefix?region=...&endpoint=...&pathStyle=1`.
 * @throws RangeError that says what was expected
 */
export function readStoreUrl(text: string): StorePlace {
	if (text.startsWith('file:')) {
		const folder = text.slice('file:'.length).replace(/^\/\//, '');
		if (!folder) throw new RangeError('expected a folder, such as file:data/files');
		return { kind: 'disk', folder };
	}
	if (!text.startsWith('s3://') || !URL.canParse(text)) {
		throw new RangeError(`expected a folder, such as file:data/files, or ${EXAMPLE}`);
	}
	const { hostname, pathname, searchParams, username, password } = new URL(text);
	// In the address they would reach logs; the SDK reads AWS_ACCESS_KEY_ID and the like.
	if (username || password) throw new RangeError('expected no credentials in the address');
	// Amazon's rules for names of buckets, dots left out: 3 to 63 of a-z, 0-9 and -.
	if (!/^[a-z0-9][a-z0-9.-]{1,61}[a-z0-9]$/.test(hostname)) {
		throw new RangeError(`expected the name of a bucket, as in ${EXAMPLE}`);
	}
	const unknown = [...searchParams.keys()].find((key) => !KNOWN.includes(key));
	if (unknown !== undefined) {
		throw new RangeError(`expected only ${KNOWN.join(', ')} behind the question mark`);
	}
	const endpoint = searchParams.get('endpoint');
	if (endpoint !== null && !/^https?:\/\/[^/?#@]+\/?$/.test(endpoint)) {
		throw new RangeError('expected an endpoint such as https://storage.example');
	}
	const region = searchParams.get('region') ?? (endpoint === null ? null : ANY_REGION);
	if (region === null || !/^[a-z0-9-]{1,40}$/.test(region)) {
		throw new RangeError(`expected a region, as in ${EXAMPLE}`);
	}
	const path = decodeURIComponent(pathname).replace(/^\/+|\/+$/g, '');
	if (!/^[\w./-]{0,200}$/.test(path)) {
		throw new RangeError('expected a prefix of letters, digits, and . _ - /');
	}
	return {
		kind: 's3',
		bucket: hostname,
		prefix: path && `${path}/`,
		region,
		endpoint,
		pathStyle: ['1', 'true'].includes(searchParams.get('pathStyle') ?? '')
	};
}
