import type { ClaimProgressView } from '../../schemas/views';

const POLL_MS = 1000;
const SLOW_POLL_MS = 4000;
/** After this many quick rounds the page asks more slowly. */
const QUICK_ROUNDS = 60;

/** Follows a claim while anything of it is computed: by events, by polling where those fail. */
export class LiveClaim {
	progress = $state<ClaimProgressView | null>(null);
	#stamp: string | null = null;
	readonly #changed: () => Promise<void>;

	/** @param changed - called when something shown of the claim is out of date */
	constructor(changed: () => Promise<void>) {
		this.#changed = changed;
	}

	/** Returns what stops it; then the page's own data count again. */
	follow(address: string): () => void {
		this.#stamp = null;
		let stop = () => {};
		const poll = () => (stop = this.#poll(address));
		if (typeof EventSource === 'undefined') poll();
		else {
			const events = new EventSource(`${address}/events`);
			events.addEventListener('progress', (event) => {
				const view = JSON.parse(String(event.data)) as ClaimProgressView;
				this.#take(view);
				if (view.settled) events.close();
			});
			events.addEventListener('error', () => {
				events.close();
				if (!this.progress?.settled) poll();
			});
			stop = () => events.close();
		}
		return () => {
			stop();
			this.progress = null;
		};
	}

	#poll(address: string): () => void {
		let waiting: ReturnType<typeof setTimeout> | undefined;
		let stopped = false;
		let rounds = 0;
		const round = async () => {
			try {
				const response = await fetch(`${address}/progress`);
				if (response.ok && !stopped) this.#take((await response.json()) as ClaimProgressView);
			} catch {
				// The next round tries again.
			}
			if (stopped || this.progress?.settled) return;
			waiting = setTimeout(() => void round(), ++rounds > QUICK_ROUNDS ? SLOW_POLL_MS : POLL_MS);
		};
		void round();
		return () => {
			stopped = true;
			clearTimeout(waiting);
		};
	}

	#take(view: ClaimProgressView): void {
		const changed = this.#stamp !== null && this.#stamp !== view.stamp;
		const ended = this.progress?.settled === false && view.settled;
		this.#stamp = view.stamp;
		this.progress = view;
		if (changed || ended) void this.#changed();
	}
}
