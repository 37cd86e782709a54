import type { ReferenceView } from '../../../schemas/views';

/** Fields in which people keep notes of their own, not facts about the paper. */
const PRIVATE =
	/^(annote|annotation|note|file|abstract|keywords?|owner|timestamp|comment|review|rating|groups|date-(added|modified)|bdsk-.*)$/i;

/** The reference without the notes that an entry from someone's own collection carries. */
export function publicReference(view: ReferenceView): ReferenceView {
	const csl: unknown = JSON.parse(view.cslJson);
	const entries = Array.isArray(csl) ? csl : [csl];
	const kept = entries.map((entry: unknown) =>
		Object.fromEntries(Object.entries(Object(entry)).filter(([key]) => !PRIVATE.test(key)))
	);
	return {
		...view,
		bibtex: withoutPrivateFields(view.bibtex),
		cslJson: JSON.stringify(kept, null, 2)
	};
}

/** Cuts whole `field = value,` parts out of an entry; braces and quotes may nest. */
export function withoutPrivateFields(bibtex: string): string {
	const field = /([,{]\s*)([A-Za-z][\w-]*)(\s*=\s*)/g;
	let out = bibtex;
	for (let match = field.exec(out); match; match = field.exec(out)) {
		const valueAt = match.index + match[0].length;
		const end = valueEnd(out, valueAt);
		if (!PRIVATE.test(match[2] ?? '')) {
			field.lastIndex = end;
			continue;
		}
		const from = match.index + 1;
		const comma = /^\s*,/.exec(out.slice(end))?.[0].length ?? 0;
		out = out.slice(0, from) + out.slice(end + comma);
		field.lastIndex = match.index;
	}
	return out;
}

function valueEnd(text: string, from: number): number {
	let depth = 0;
	let quoted = false;
	for (let i = from; i < text.length; i++) {
		const escaped = text[i - 1] === '\\';
		if (text[i] === '"' && depth === 0 && !escaped) quoted = !quoted;
		if (text[i] === '{' && !escaped) depth++;
		if (text[i] === '}' && !escaped && --depth < 0) return i;
		if (text[i] === ',' && depth === 0 && !quoted) return i;
	}
	return text.length;
}
