/** Characters that end a header's line or turn the writing direction around. */
// eslint-disable-next-line no-control-regex
const UNSAFE = /[\u0000-\u001f\u007f-\u009f\u2028\u2029\u202a-\u202e\u2066-\u2069]+/g;

/** RFC 5322 recommends 78 characters a line; longer ones are folded by the transport. */
const LONGEST = 150;

/** A header holds one line, whatever somebody called a group, a claim or themselves. */
export function headerText(text: string): string {
	const line = text.replace(UNSAFE, ' ').replace(/\s+/g, ' ').trim();
	return Array.from(line).slice(0, LONGEST).join('');
}
