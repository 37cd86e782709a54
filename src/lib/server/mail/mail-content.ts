export interface Figure {
	readonly label: string;
	readonly value: string;
	/** The one the mail is about, set in the tag's colour. */
	readonly strong?: boolean;
}

export type Tone = 'plain' | 'agreement' | 'discrepancy' | 'open';

/** What a mail says, before it is text or HTML; nothing in it is markup. */
export interface MailContent {
	readonly subject: string;
	/** A word over the heading: `≠ Discrepancy`, `Task 4`. */
	readonly tag: { readonly text: string; readonly tone: Tone };
	readonly heading: string;
	/** Values to compare, in the mono face. */
	readonly figures?: readonly Figure[];
	readonly paragraphs: readonly string[];
	readonly list?: { readonly title: string; readonly items: readonly string[] } | null;
	/** Somebody's own words, their line breaks kept. */
	readonly quote?: { readonly title: string; readonly text: string } | null;
	/** What it is about: claim, reference, due date. */
	readonly facts?: readonly (readonly [label: string, value: string])[];
	/** Of a digest: what happened, group by group. */
	readonly sections?: readonly MailSection[];
	readonly action: { readonly label: string; readonly address: string };
	readonly footer: MailFooter;
}

export interface MailSection {
	readonly title: string;
	readonly parts: readonly {
		readonly title: string;
		readonly items: readonly {
			readonly text: string;
			readonly detail: string;
			readonly address: string;
		}[];
	}[];
}

export interface MailFooter {
	/** Why this person gets it. */
	readonly why: string;
	/** Where to choose what comes by mail; null for somebody without an account. */
	readonly choices: string | null;
	/** Turns off this kind of mail. */
	readonly unsubscribe: string | null;
}

export interface RenderedMail {
	readonly subject: string;
	readonly text: string;
	readonly html: string;
}
