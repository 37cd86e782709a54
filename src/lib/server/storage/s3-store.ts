import {
	DeleteObjectCommand,
	GetObjectCommand,
	ListObjectsV2Command,
	NoSuchKey,
	PutObjectCommand,
	S3Client
} from '@aws-sdk/client-s3';
import { StorageError, assertKey, isKey, type FileStore } from './file-store';
import type { StorePlace } from './store-url';

export type S3Place = Extract<StorePlace, { kind: 's3' }>;

/** Why each is what it is: files are 10 MB at most, and a person waits for the answer. */
export const S3_LIMITS = {
	connectMs: 5_000,
	/** Of one try, until the answer begins: 10 MB over a slow line. */
	answerMs: 30_000,
	/** Of everything together, tries and the answer's body included. */
	wholeMs: 75_000,
	/** One, and two more after an error that may pass. */
	tries: 3
} as const;

type Limits = Readonly<Record<keyof typeof S3_LIMITS, number>>;

/** Objects in a bucket, under generated names; credentials come from where the SDK looks for them. */
export function createS3Store(place: S3Place, limits: Limits = S3_LIMITS): FileStore {
	const { bucket: Bucket, prefix, region, endpoint, pathStyle } = place;
	const client = new S3Client({
		region,
		...(endpoint === null ? {} : { endpoint }),
		forcePathStyle: pathStyle,
		maxAttempts: limits.tries,
		// By default the SDK adds checksum headers and trailers that services other than Amazon's
		// refuse; every file's SHA-256 is kept and compared by us.
		requestChecksumCalculation: 'WHEN_REQUIRED',
		responseChecksumValidation: 'WHEN_REQUIRED',
		requestHandler: {
			connectionTimeout: limits.connectMs,
			requestTimeout: limits.answerMs,
			throwOnRequestTimeout: true
		}
	});

	async function within<T>(
		what: string,
		work: (options: { abortSignal: AbortSignal }) => Promise<T>
	): Promise<T> {
		const limit = new AbortController();
		let timer: NodeJS.Timeout | undefined;
		const late = new Promise<never>((_, reject) => {
			timer = setTimeout(() => {
				reject(new Error(`no answer within ${limits.wholeMs} ms`));
				limit.abort();
			}, limits.wholeMs);
		});
		try {
			return await Promise.race([work({ abortSignal: limit.signal }), late]);
		} catch (error) {
			throw new StorageError(`${what} an object in the bucket ${Bucket} failed`, { cause: error });
		} finally {
			clearTimeout(timer);
		}
	}

	const keyOf = (key: string) => {
		assertKey(key);
		return prefix + key;
	};

	return {
		async put(key, bytes, mediaType) {
			const Key = keyOf(key);
			const object = { Bucket, Key, Body: bytes, ContentType: mediaType };
			await within('writing', (options) => client.send(new PutObjectCommand(object), options));
		},
		async get(key) {
			const Key = keyOf(key);
			return within('reading', async (options) => {
				try {
					const { Body } = await client.send(new GetObjectCommand({ Bucket, Key }), options);
					if (!Body) throw new Error('the answer has no body');
					return await Body.transformToByteArray();
				} catch (error) {
					if (error instanceof NoSuchKey) return null;
					throw error;
				}
			});
		},
		async delete(key) {
			const Key = keyOf(key);
			await within('deleting', (options) =>
				client.send(new DeleteObjectCommand({ Bucket, Key }), options)
			);
		},
		async *keys() {
			let next: string | undefined;
			do {
				const page = await within('listing', (options) =>
					client.send(
						new ListObjectsV2Command({ Bucket, Prefix: prefix, ContinuationToken: next }),
						options
					)
				);
				for (const { Key } of page.Contents ?? []) {
					const key = Key?.slice(prefix.length) ?? '';
					if (isKey(key)) yield key;
				}
				next = page.IsTruncated ? page.NextContinuationToken : undefined;
			} while (next !== undefined);
		},
		close: async () => client.destroy()
	};
}
