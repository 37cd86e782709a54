import type { LedgerRow } from '../../schemas/views';

const POLL_MS = 1500;

const isUnderWay = (row: LedgerRow) =>
	row.progress?.state === 'queued' ||
	row.progress?.state === 'running' ||
	row.stations?.complete === false;

/** Keeps rows whose jobs run up to date; the rest of the page stays as it is. */
export class LiveRows {
	/** Fresher rows by id. */
	#fresh = $state<Readonly<Record<string, LedgerRow>>>({});
	announcement = $state('');

	/** The rows of the page with the fresher ones in their place. */
	latest(rows: readonly LedgerRow[]): readonly LedgerRow[] {
		return rows.map((row) => this.#fresh[row.id] ?? row);
	}

	/** Polls until nothing among the rows runs any more. Returns what stops it. */
	follow(group: string, rows: readonly LedgerRow[]): () => void {
		let waiting: ReturnType<typeof setTimeout> | undefined;
		let pending = rows.filter(isUnderWay);
		let stopped = false;
		this.#fresh = {};
		const poll = async () => {
			const numbers = pending.map((row) => row.number).join(',');
			try {
				const response = await fetch(`/api/v1/groups/${group}/claims?numbers=${numbers}`);
				if (stopped || !response.ok) return;
				const { items } = (await response.json()) as { items: readonly LedgerRow[] };
				this.#take(pending, items);
				pending = items.filter(isUnderWay);
			} catch {
				// The next round tries again; the page shows what it had.
			}
			if (!stopped && pending.length > 0) waiting = setTimeout(() => void poll(), POLL_MS);
		};
		if (pending.length > 0) waiting = setTimeout(() => void poll(), POLL_MS);
		return () => {
			stopped = true;
			clearTimeout(waiting);
		};
	}

	#take(before: readonly LedgerRow[], after: readonly LedgerRow[]): void {
		this.#fresh = { ...this.#fresh, ...Object.fromEntries(after.map((row) => [row.id, row])) };
		const changed = after.filter((row) => {
			const old = before.find((candidate) => candidate.id === row.id);
			return old && old.verdict.status !== row.verdict.status;
		});
		if (changed.length > 0)
			this.announcement = changed
				.map((row) => `Claim ${row.number}: ${row.verdict.status}`)
				.join('. ');
	}
}
