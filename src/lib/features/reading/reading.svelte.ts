import type { ClaimInput } from '../../schemas/claim-input';
import type { ReadingView } from '../../schemas/views';

const DEBOUNCE_MS = 250;

/** What the product understands of a half-filled form, asked for as the person types. */
export class Reading {
	current = $state<ReadingView | null>(null);
	/** The last question got no answer; the form still checks everything when it is sent. */
	failed = $state(false);
	#waiting: ReturnType<typeof setTimeout> | undefined;
	#asking: AbortController | undefined;
	readonly #group: string;

	/** @param group - slug of the group whose papers and claims the answer may speak of */
	constructor(group: string, start: ReadingView | null) {
		this.#group = group;
		this.current = start;
	}

	/** Asks when nothing more was typed for a moment; an answer to what was typed before is dropped. */
	ask(input: ClaimInput): void {
		this.stop();
		this.#waiting = setTimeout(() => void this.#send(input), DEBOUNCE_MS);
	}

	stop(): void {
		clearTimeout(this.#waiting);
		this.#asking?.abort();
	}

	async #send(input: ClaimInput): Promise<void> {
		this.#asking?.abort();
		const asking = new AbortController();
		this.#asking = asking;
		try {
			const response = await fetch('/api/v1/readings', {
				method: 'POST',
				headers: { 'content-type': 'application/json', accept: 'application/json' },
				body: JSON.stringify({ group: this.#group, ...input }),
				signal: asking.signal
			});
			this.failed = !response.ok;
			if (response.ok) this.current = (await response.json()) as ReadingView;
		} catch {
			if (!asking.signal.aborted) this.failed = true;
		}
	}
}
