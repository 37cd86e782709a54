import type { LedgerRow } from '../../schemas/views';

/** Name of the form that the rows' boxes belong to. */
export const SELECTION_FORM = 'selected-claims';

/** Which claims of the page are ticked. The boxes themselves are the form; this counts them. */
export class Selection {
	#numbers = $state<readonly number[]>([]);

	/** Those ticked among the rows shown. */
	among(rows: readonly LedgerRow[]): number {
		return rows.filter(({ number }) => this.#numbers.includes(number)).length;
	}

	has(number: number): boolean {
		return this.#numbers.includes(number);
	}

	set(number: number, ticked: boolean): void {
		const rest = this.#numbers.filter((other) => other !== number);
		this.#numbers = ticked ? [...rest, number] : rest;
	}

	setAll(rows: readonly LedgerRow[], ticked: boolean): void {
		this.#numbers = ticked ? rows.map(({ number }) => number) : [];
	}
}
