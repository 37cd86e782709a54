import type { Relation } from '../../ledger/claim';
import type { FieldIssueView } from '../../schemas/field-issue';
import type { ReadingView } from '../../schemas/views';

const DEBOUNCE_MS = 250;

/** How a value found is read, asked of the server while it is typed. */
export class ValueReading {
	/** `Read as 0.25075 to 0.25085`; null while there is nothing to read. */
	text = $state<string | null>(null);
	issue = $state<FieldIssueView | null>(null);
	#waiting: ReturnType<typeof setTimeout> | undefined;
	#asking: AbortController | undefined;

	ask(group: string, printed: string, relation: Relation): void {
		clearTimeout(this.#waiting);
		this.#asking?.abort();
		if (printed.trim() === '') {
			this.text = null;
			this.issue = null;
			return;
		}
		this.#waiting = setTimeout(() => void this.#send({ group, printed, relation }), DEBOUNCE_MS);
	}

	stop(): void {
		clearTimeout(this.#waiting);
		this.#asking?.abort();
	}

	async #send(body: object): Promise<void> {
		const asking = new AbortController();
		this.#asking = asking;
		try {
			const response = await fetch('/api/v1/readings', {
				method: 'POST',
				headers: { 'content-type': 'application/json', accept: 'application/json' },
				body: JSON.stringify(body),
				signal: asking.signal
			});
			const reading = response.ok ? ((await response.json()) as ReadingView) : null;
			this.text = reading?.value ?? null;
			this.issue = reading?.issues.find(({ field }) => field === 'printed') ?? null;
		} catch {
			// Without an answer nothing is said; the server reads the value when it is submitted.
			if (!asking.signal.aborted) this.text = this.issue = null;
		}
	}
}
