/** A text as the server would show it, asked for when the person wants to see it. */
export class Preview {
	html = $state<string | null>(null);
	message = $state<string | null>(null);
	/** What the writer may not have meant. */
	warnings = $state<readonly string[]>([]);
	loading = $state(false);
	#of = '';
	#asked = 0;

	/** Takes away a preview of what has been changed since. */
	follow(text: string): void {
		if (text === this.#of) return;
		this.#asked++;
		this.html = null;
		this.warnings = [];
		this.message = null;
		this.loading = false;
	}

	async ask(group: string, text: string): Promise<void> {
		const asked = ++this.#asked;
		this.#of = text;
		this.loading = true;
		this.message = null;
		let html: string | null = null;
		let warnings: readonly string[] = [];
		let message: string | null;
		try {
			const response = await fetch(`/api/v1/groups/${group}/previews`, {
				method: 'POST',
				headers: { 'content-type': 'application/json' },
				body: JSON.stringify({ text })
			});
			const answer: { html?: string; warnings?: string[]; detail?: string } = await response.json();
			html = answer.html ?? null;
			warnings = answer.warnings ?? [];
			message = response.ok ? null : (answer.detail ?? 'There is no preview right now.');
		} catch {
			message = 'There is no preview: the server can’t be reached. Your text is kept here.';
		}
		if (asked !== this.#asked) return;
		this.loading = false;
		this.html = html;
		this.warnings = warnings;
		this.message = message;
	}
}
