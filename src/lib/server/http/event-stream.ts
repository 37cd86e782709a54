const LOOK_EVERY_MS = 1_000;
/** Proxies drop a silent connection; a comment keeps it. */
const HEARTBEAT_MS = 15_000;
/** A stream ends now and then, so that rights taken away take effect; the browser comes back. */
const LONGEST_STREAM_MS = 10 * 60_000;

export interface Look<T> {
	readonly data: T;
	/** Nothing more will come. */
	readonly last: boolean;
}

/**
 * Server-sent events of one name: the first data at once, then whatever `look` finds whenever it
 * differs from what was sent, until it says that it was the last, or the reader leaves.
 */
export function eventStream<T>(
	signal: AbortSignal,
	name: string,
	first: T,
	look: () => Promise<Look<T>>
): Response {
	const encoder = new TextEncoder();
	let timer: ReturnType<typeof setTimeout> | undefined;
	let open = true;
	const started = performance.now();
	const leave = () => {
		open = false;
		clearTimeout(timer);
	};
	const stream = new ReadableStream<Uint8Array>({
		start(controller) {
			let sent = '';
			let spoke = performance.now();
			const send = (data: T): void => {
				const text = JSON.stringify(data);
				const silent = performance.now() - spoke;
				if (text === sent && silent < HEARTBEAT_MS) return;
				const event = text === sent ? ': still here\n\n' : `event: ${name}\ndata: ${text}\n\n`;
				controller.enqueue(encoder.encode(event));
				sent = text;
				spoke = performance.now();
			};
			const end = (): void => {
				if (!open) return;
				leave();
				controller.close();
			};
			const round = async (): Promise<void> => {
				try {
					const { data, last } = await look();
					if (!open) return;
					send(data);
					if (last || performance.now() - started > LONGEST_STREAM_MS) end();
					else timer = setTimeout(() => void round(), LOOK_EVERY_MS);
				} catch {
					end();
				}
			};
			signal.addEventListener('abort', end);
			send(first);
			timer = setTimeout(() => void round(), 0);
		},
		cancel: leave
	});
	return new Response(stream, {
		headers: {
			'Content-Type': 'text/event-stream; charset=utf-8',
			'Cache-Control': 'no-store',
			'X-Accel-Buffering': 'no'
		}
	});
}
