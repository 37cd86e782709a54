import { mentionTyped, suggestHandles } from '../../ledger/mentions';

export interface OfferedHandle {
	readonly handle: string;
	readonly name: string;
}

/** The list that opens while a mention is typed: what it offers, and which one is chosen. */
export class MentionPicker {
	offered = $state.raw<readonly OfferedHandle[]>([]);
	chosen = $state(0);
	#start = 0;
	#caret = 0;
	/** Where Escape closed the list: it stays closed until another mention is begun. */
	#dismissed: number | null = null;
	readonly #handles: () => readonly OfferedHandle[];

	constructor(handles: () => readonly OfferedHandle[]) {
		this.#handles = handles;
	}

	get open(): boolean {
		return this.offered.length > 0;
	}

	/** Looks at the text before the caret, after each change of either. */
	follow(text: string, caret: number): void {
		const found = mentionTyped(text, caret);
		if (!found || found.start === this.#dismissed) {
			if (!found) this.#dismissed = null;
			this.offered = [];
			return;
		}
		const fitting = suggestHandles(this.#handles(), found.typed);
		const complete = fitting.length === 1 && fitting[0]?.handle === found.typed.toLowerCase();
		this.offered = complete ? [] : fitting;
		this.chosen = 0;
		this.#start = found.start;
		this.#caret = caret;
	}

	move(by: 1 | -1): void {
		const { length } = this.offered;
		this.chosen = (this.chosen + by + length) % length;
	}

	dismiss(): void {
		this.#dismissed = this.#start;
		this.offered = [];
	}

	close(): void {
		this.offered = [];
	}

	/** The text with the mention completed, and where the caret goes; null when none is offered. */
	accept(text: string, index = this.chosen): { text: string; caret: number } | null {
		const handle = this.offered[index]?.handle;
		if (handle === undefined) return null;
		const before = `${text.slice(0, this.#start)}@${handle} `;
		this.offered = [];
		return { text: before + text.slice(this.#caret).replace(/^ /, ''), caret: before.length };
	}
}
